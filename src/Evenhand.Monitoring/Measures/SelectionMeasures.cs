using Evenhand.Monitoring.Windows;
using Evenhand.Statistics.HypothesisTests;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Monitoring.Measures;

/// <summary>Selection rates and their comparison with the reference, over records whose labels are known.</summary>
public sealed class SelectionMeasures : IMeasureFamily
{
    /// <inheritdoc/>
    public void Measure(GroupingView view, ICollection<Reading> readings)
    {
        ArgumentNullException.ThrowIfNull(view);
        ArgumentNullException.ThrowIfNull(readings);
        foreach (GroupCell group in view.Groups.Concat(view.Set))
        {
            readings.Add(Rate(view, group));
        }

        foreach (Func<GroupingView, GroupCell, Reading> compare in (Func<GroupingView, GroupCell, Reading>[])
            [Gap, ImpactRatio, UnfavourableRatio, Shortfall, OddsRatio, RateZ])
        {
            foreach (GroupCell group in view.Compared())
            {
                readings.Add(compare(view, group));
            }
        }

        foreach (GroupCell group in view.Groups.Concat(view.Set))
        {
            CellCounts c = group.Counts;
            readings.Add(view.Rate(MeasureNames.OtherRate, group, c.Other, c.Decided + c.Other));
        }
    }

    private static Reading Rate(GroupingView view, GroupCell group)
    {
        CellCounts c = group.Counts;
        Reading row = view.Rate(MeasureNames.SelectionRate, group, c.Favourable, c.Decided);
        row.Favourable = c.Favourable;
        row.KnownShare = view.Shape.Name is null ? null : view.KnownShare;
        return row;
    }

    private static Reading Gap(GroupingView view, GroupCell group)
    {
        CellCounts c = group.Counts, r = view.Reference!.Counts;
        Reading row = view.Gap(MeasureNames.SelectionRateGap, group, c.Favourable, c.Decided, r.Favourable, r.Decided);
        row.Favourable = c.Favourable;
        return row;
    }

    private static Reading ImpactRatio(GroupingView view, GroupCell group)
    {
        CellCounts c = group.Counts, r = view.Reference!.Counts;
        return Ratio(view, MeasureNames.ImpactRatio, group, c.Favourable, c.Decided, r.Favourable, r.Decided);
    }

    private static Reading UnfavourableRatio(GroupingView view, GroupCell group)
    {
        CellCounts c = group.Counts, r = view.Reference!.Counts;
        return Ratio(view, MeasureNames.UnfavourableRatio, group, c.Unfavourable, c.Decided, r.Unfavourable, r.Decided);
    }

    /// <summary>
    /// Katz's interval is shown where it exists; rules judge by Koopman's score interval, which also serves where a cell is
    /// empty or full and the log interval breaks down or collapses.
    /// </summary>
    private static Reading Ratio(GroupingView view, string measure, GroupCell group, long x, long n, long xReference, long nReference)
    {
        Reading row = view.Comparison(measure, group);
        row.Count = n;
        row.Favourable = group.Counts.Favourable;
        row.SmallestCount = Math.Min(n, nReference);
        Interval score = KoopmanRatio.Of(x, n, xReference, nReference, view.Level);
        bool isEdge = x == 0 || xReference == 0 || (x == n && xReference == nReference);
        row.Method = isEdge ? "koopman_score" : "katz_log";
        if (n > 0 && nReference > 0 && xReference == 0)
        {
            row.AddNote(x == 0 ? "neither side has any: the ratio is undefined" : "the reference has none: the ratio is unbounded");
        }

        if (!isEdge && (x == n || xReference == nReference))
        {
            row.AddNote("one side is all favourable: the log interval is too narrow, rules judge by the score interval");
        }

        double value = xReference == 0 ? double.NaN : (double)x / n / ((double)xReference / nReference);
        view.SetNumbers(row, value, isEdge ? score : KatzRatio.Of(x, n, xReference, nReference, view.Level));
        row.JudgedLow = score.Low;
        row.JudgedHigh = score.High;
        return row;
    }

    private static Reading Shortfall(GroupingView view, GroupCell group)
    {
        Reading gap = Gap(view, group);
        Reading row = view.Comparison(MeasureNames.Shortfall, group);
        row.Count = gap.Count;
        row.Favourable = gap.Favourable;
        row.SmallestCount = gap.SmallestCount;
        row.Method = gap.Method;
        double n = group.Counts.Decided;
        view.SetNumbers(row, -n * gap.Value!.Value, new Interval(-n * gap.High!.Value, -n * gap.Low!.Value));
        return row;
    }

    private static Reading OddsRatio(GroupingView view, GroupCell group)
    {
        CellCounts c = group.Counts, r = view.Reference!.Counts;
        Reading row = view.Comparison(MeasureNames.OddsRatio, group);
        row.Count = c.Decided;
        row.Favourable = c.Favourable;
        row.SmallestCount = Math.Min(c.Decided, r.Decided);
        row.Method = "woolf_logit";
        bool isEmpty = c.Decided == 0 || r.Decided == 0;
        row.PValue = isEmpty ? null : FisherExact.TwoSided(c.Favourable, c.Unfavourable, r.Favourable, r.Unfavourable);
        double value = isEmpty ? double.NaN : (double)c.Favourable * r.Unfavourable / ((double)c.Unfavourable * r.Favourable);
        if (!isEmpty && (c.Favourable == 0 || c.Unfavourable == 0 || r.Favourable == 0 || r.Unfavourable == 0))
        {
            row.AddNote("a cell is empty: no logit interval");
        }

        view.SetNumbers(row, value, WoolfOddsRatio.Of(c.Favourable, c.Unfavourable, r.Favourable, r.Unfavourable, view.Level));
        return row;
    }

    private static Reading RateZ(GroupingView view, GroupCell group)
    {
        CellCounts c = group.Counts, r = view.Reference!.Counts;
        Reading row = view.Comparison(MeasureNames.RateZ, group);
        row.Count = c.Decided;
        row.Favourable = c.Favourable;
        row.SmallestCount = Math.Min(c.Decided, r.Decided);
        row.Method = "pooled_z";
        TwoProportionZ test = PooledTwoProportionZ.Test(c.Favourable, c.Decided, r.Favourable, r.Decided);
        row.Value = test.Z;
        row.PValue = double.IsNaN(test.P) ? null : test.P;
        if (double.IsNaN(test.Z))
        {
            row.AddNote(c.Decided == 0 || r.Decided == 0 ? "no records to measure" : "every decision is the same: no variance to test against");
        }

        return row;
    }
}
