using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Measures;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Alerts;

/// <summary>One evaluation: buckets merged into windows, windows measured, readings judged.</summary>
/// <remarks>Shards are merged in partition order; sums are integers, so the order changes no bit.</remarks>
public sealed class Tick
{
    private readonly SumLayout _layout;
    private readonly Charter _charter;
    private readonly LocalDays _days;
    private readonly IReadOnlyList<Shard> _shards;

    /// <summary>Ticks over the shards of a charter.</summary>
    public Tick(SumLayout layout, IReadOnlyList<Shard> shards)
    {
        ArgumentNullException.ThrowIfNull(layout);
        ArgumentNullException.ThrowIfNull(shards);
        _layout = layout;
        _charter = layout.Charter;
        _days = new LocalDays(_charter.TimeZone);
        _shards = shards;
    }

    /// <summary>Evaluates every window that ends at an as-of.</summary>
    /// <param name="asOf">Microseconds since 1970-01-01T00:00:00Z.</param>
    /// <param name="counts">What became of the records.</param>
    /// <param name="withAll">Whether to add the window of every record.</param>
    public TickResult At(long asOf, ShardCounts counts, bool withAll)
    {
        long? newest = _shards.Max(s => s.Newest);
        long oldest = _shards.Min(s => s.Oldest) ?? asOf;
        List<WindowSpan> spans = [.. _charter.Windows.Select(w => WindowSpan.Ending(w, asOf, _days))];
        if (withAll)
        {
            spans.Add(WindowSpan.All(oldest, asOf));
        }

        List<WindowSums> together = [.. spans.Select(s => Merge(s, s.Name, null))];
        List<WindowSums> slices = [.. spans.SelectMany(s => SliceTexts().Select(text => Merge(s, s.Name, text))).Where(HasRecords)];
        List<WindowSums> sums = [.. together.SelectMany(t => slices.Where(s => s.Window == t.Window).Prepend(t))];
        List<Reading> readings = [.. sums.SelectMany(MeasureEngine.Measure)];
        Dictionary<string, WindowSums> baselines = Baselines(spans);
        IReadOnlyList<Judgement> judgements = RuleBook.Judge(new RuleContext
        {
            Charter = _charter,
            AsOf = asOf,
            Newest = newest,
            Counts = counts,
            Readings = readings,
            Windows = together,
            Slices = slices,
            BaselineOf = window => baselines.GetValueOrDefault(window),
        });
        return new TickResult(asOf, spans, sums, [.. BaselinesOfRules(baselines)], readings, judgements);
    }

    private static bool HasRecords(WindowSums sums)
    {
        CellCounts everyone = sums.Counts(sums.Layout.Groupings[0], 0);
        return everyone.Decided + everyone.Other > 0;
    }

    private IEnumerable<string> SliceTexts() =>
        _shards.SelectMany(s => s.SliceNumbers().Select(n => s.Slices.Text(n)!)).Distinct();

    private WindowSums Merge(WindowSpan span, string name, string? slice)
    {
        long[] values = new long[_layout.Length];
        foreach (Shard shard in _shards)
        {
            if (slice is null)
            {
                shard.AddWindow(span, 0, values);
                continue;
            }

            foreach (int number in shard.SliceNumbers().Where(n => shard.Slices.Text(n) == slice))
            {
                shard.AddWindow(span, number, values);
            }
        }

        return new WindowSums(_layout, name, slice, values);
    }

    /// <summary>The baseline of each window: the charter's stretch before it, or its fixed one.</summary>
    private Dictionary<string, WindowSums> Baselines(List<WindowSpan> spans)
    {
        Dictionary<string, WindowSums> baselines = [];
        foreach (WindowSpan span in spans.Where(s => s.Name != RuleReadings.All))
        {
            Baseline baseline = _charter.Baseline;
            WindowSpan before = baseline.Length is { } length
                ? WindowSpan.Before(span, length, _days)
                : WindowSpan.Between(span.Name, baseline.From!.Value, baseline.To!.Value, _days);
            baselines[span.Name] = Merge(before, span.Name, null);
        }

        return baselines;
    }

    private IEnumerable<WindowSums> BaselinesOfRules(Dictionary<string, WindowSums> baselines) => _charter.Alerts
        .Where(r => r.Shift is not null)
        .Select(r => RuleReadings.WindowOf(r, _charter))
        .Distinct()
        .Where(baselines.ContainsKey)
        .Select(w => baselines[w]);
}
