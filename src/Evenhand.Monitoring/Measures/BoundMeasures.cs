using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Windows;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Monitoring.Measures;

/// <summary>What holds of rates, gaps and ratios whatever the missing labels are.</summary>
/// <remarks>
/// Sharp bounds in the sense of C. F. Manski, "Nonparametric Bounds on Treatment Effects", American Economic Review 80 (1990)
/// 319–323, over all assignments of the missing labels that the labels known of a record allow. A record with an unlisted or
/// declined label belongs to no listed group. The extremes give favourable records that may belong to either side to one side
/// and unfavourable ones to the other: a rate rises with the former and falls with the latter.
/// </remarks>
public sealed class BoundMeasures : IMeasureFamily
{
    private const string MethodName = "sharp_bounds";

    /// <inheritdoc/>
    public void Measure(GroupingView view, ICollection<Reading> readings)
    {
        ArgumentNullException.ThrowIfNull(view);
        ArgumentNullException.ThrowIfNull(readings);
        if (view.Shape.Name is null)
        {
            return;
        }

        Dictionary<int, Ranges> ranges = view.Groups.ToDictionary(g => g.Index, g => RangesOf(view, g));
        foreach (GroupCell group in view.Groups)
        {
            Reading row = Row(view.Row(MeasureNames.SelectionRate, group, BasisNames.Bounds), group, null);
            row.KnownShare = view.KnownShare;
            Set(row, ranges[group.Index].Favourable);
            readings.Add(row);
        }

        foreach ((string measure, Func<Ranges, Ranges, Interval> compare) in Comparisons)
        {
            foreach (GroupCell group in view.Compared())
            {
                Reading row = Row(view.Comparison(measure, group, BasisNames.Bounds), group, view.Reference);
                Set(row, compare(ranges[group.Index], ranges[view.Reference!.Index]));
                readings.Add(row);
            }
        }
    }

    private static (string Measure, Func<Ranges, Ranges, Interval> Compare)[] Comparisons { get; } =
    [
        (MeasureNames.SelectionRateGap, (g, r) => new Interval(g.Favourable.Low - r.Favourable.High, g.Favourable.High - r.Favourable.Low)),
        (MeasureNames.ImpactRatio, (g, r) => new Interval(g.Favourable.Low / r.Favourable.High, g.Favourable.High / r.Favourable.Low)),
        (MeasureNames.UnfavourableRatio, (g, r) => new Interval(g.Unfavourable.Low / r.Unfavourable.High, g.Unfavourable.High / r.Unfavourable.Low)),
    ];

    private static Reading Row(Reading row, GroupCell group, GroupCell? reference)
    {
        row.Count = group.Counts.Decided;
        row.SmallestCount = Math.Min(group.Counts.Decided, reference?.Counts.Decided ?? long.MaxValue);
        row.Method = MethodName;
        return row;
    }

    private static void Set(Reading row, Interval bounds)
    {
        row.Low = bounds.Low;
        row.High = bounds.High;
        if (!double.IsFinite(bounds.Low) || !double.IsFinite(bounds.High))
        {
            row.AddNote(double.IsInfinity(bounds.High) ? "the reference may have none: unbounded" : "no records to bound by");
        }
    }

    private static Ranges RangesOf(GroupingView view, GroupCell group)
    {
        (long favourable, long unfavourable) = MayBelong(view, group.Index);
        CellCounts c = group.Counts;
        return new Ranges(
            Range(c.Favourable, c.Unfavourable, favourable, unfavourable),
            Range(c.Unfavourable, c.Favourable, unfavourable, favourable));
    }

    /// <summary>The least and greatest share of hits, where some further hits and misses may or may not be the group's.</summary>
    private static Interval Range(long hits, long misses, long mayHit, long mayMiss) => new(
        Share(hits, misses + mayMiss, whenEmpty: mayHit > 0 ? 1 : double.NaN),
        Share(hits + mayHit, misses, whenEmpty: mayMiss > 0 ? 0 : double.NaN));

    private static double Share(long hits, long misses, double whenEmpty) =>
        hits + misses == 0 ? whenEmpty : (double)hits / (hits + misses);

    private static (long Favourable, long Unfavourable) MayBelong(GroupingView view, int group)
    {
        long favourable = 0, unfavourable = 0;
        for (int cell = 0; cell < view.Shape.Cells; cell++)
        {
            if (cell != group && Allows(view.Shape, cell, group))
            {
                CellCounts c = view.Sums.Counts(view.Shape, cell);
                favourable += c.Favourable;
                unfavourable += c.Unfavourable;
            }
        }

        return (favourable, unfavourable);
    }

    /// <summary>Whether records of a cell with missing labels may be of a group: each label missing or the group's.</summary>
    private static bool Allows(GroupingShape shape, int cell, int group)
    {
        for (int i = 0; i < shape.Fields.Count; i++)
        {
            CodedField field = shape.Fields[i];
            int code = shape.CodeOf(cell, i);
            if (code != field.MissingCode && code != shape.CodeOf(group, i))
            {
                return false;
            }
        }

        return true;
    }

    private readonly record struct Ranges(Interval Favourable, Interval Unfavourable);
}
