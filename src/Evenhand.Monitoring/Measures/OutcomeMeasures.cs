using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Windows;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Monitoring.Measures;

/// <summary>Rates that set decisions against outcomes, over records whose outcome is known.</summary>
/// <remarks>
/// Where outcomes are seen after favourable decisions only, rates among positive or negative outcomes are bounds: each
/// unfavourable decision without an outcome may have been either (C. F. Manski, American Economic Review 80 (1990) 319–323).
/// </remarks>
public sealed class OutcomeMeasures : IMeasureFamily
{
    /// <inheritdoc/>
    public void Measure(GroupingView view, ICollection<Reading> readings)
    {
        ArgumentNullException.ThrowIfNull(view);
        ArgumentNullException.ThrowIfNull(readings);
        if (view.Charter.Outcome is null)
        {
            return;
        }

        bool isSelective = view.Charter.Outcome.ObservedWhen == OutcomeObservation.Favourable;
        Add(view, readings, MeasureNames.TruePositiveRate, c => (c.FavourablePositive, c.Positive), isSelective);
        Add(view, readings, MeasureNames.FalsePositiveRate, c => (c.FavourableNegative, c.Negative), isSelective);
        Add(view, readings, MeasureNames.Precision, c => (c.FavourablePositive, c.FavourablePositive + c.FavourableNegative), false);
        Add(view, readings, MeasureNames.OutcomeRate, c => (c.Positive, c.Positive + c.Negative), false);
    }

    private static void Add(
        GroupingView view,
        ICollection<Reading> readings,
        string measure,
        Func<CellCounts, (long Hits, long Count)> share,
        bool asBounds)
    {
        foreach (GroupCell group in view.Groups.Concat(view.Set))
        {
            (long hits, long count) = share(group.Counts);
            readings.Add(asBounds ? Bounds(view, measure, group, share) : view.Rate(measure, group, hits, count));
        }

        foreach (GroupCell group in view.Compared())
        {
            (long hits, long count) = share(group.Counts);
            (long hitsReference, long countReference) = share(view.Reference!.Counts);
            readings.Add(asBounds
                ? BoundsGap(view, measure, group, share)
                : view.Gap(measure + MeasureNames.GapSuffix, group, hits, count, hitsReference, countReference));
        }
    }

    private static Reading Bounds(GroupingView view, string measure, GroupCell group, Func<CellCounts, (long Hits, long Count)> share)
    {
        Reading row = view.Row(measure, group, BasisNames.Bounds);
        return Set(row, group.Counts.Decided, long.MaxValue, Range(group.Counts, share));
    }

    private static Reading BoundsGap(GroupingView view, string measure, GroupCell group, Func<CellCounts, (long Hits, long Count)> share)
    {
        Interval own = Range(group.Counts, share);
        Interval reference = Range(view.Reference!.Counts, share);
        Reading row = view.Comparison(measure + MeasureNames.GapSuffix, group, BasisNames.Bounds);
        return Set(row, group.Counts.Decided, view.Reference.Counts.Decided, new Interval(own.Low - reference.High, own.High - reference.Low));
    }

    private static Interval Range(CellCounts counts, Func<CellCounts, (long Hits, long Count)> share)
    {
        (long hits, long count) = share(counts);
        long most = count + counts.UnfavourableUnknown;
        return new Interval(most == 0 ? double.NaN : (double)hits / most, hits == 0 && most == 0 ? double.NaN : hits == 0 ? 0 : (double)hits / count);
    }

    private static Reading Set(Reading row, long count, long countReference, Interval bounds)
    {
        row.Count = count;
        row.SmallestCount = Math.Min(count, countReference);
        row.Method = "sharp_bounds";
        row.Low = bounds.Low;
        row.High = bounds.High;
        row.AddNote(double.IsNaN(bounds.Low) ? "no records to bound by" : "outcomes are seen after favourable decisions only");
        return row;
    }
}
