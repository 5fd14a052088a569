using Evenhand.Statistics.HypothesisTests;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Monitoring.Measures;

/// <summary>Comparisons within the joint strata of the charter's <c>adjust</c> fields; records that lack any of them are left out.</summary>
public sealed class AdjustedMeasures : IMeasureFamily
{
    /// <inheritdoc/>
    public void Measure(GroupingView view, ICollection<Reading> readings)
    {
        ArgumentNullException.ThrowIfNull(view);
        ArgumentNullException.ThrowIfNull(readings);
        if (view.Shape.StrataAt < 0)
        {
            return;
        }

        List<Reading> gaps = [];
        foreach (GroupCell group in view.Compared())
        {
            (long[] strata, long counted, long smallest) = Strata(view, group);
            readings.Add(OddsRatio(view, group, strata, counted, smallest));
            gaps.Add(Row(view, MeasureNames.AdjustedRateGap, group, counted, smallest, "sato", MantelHaenszel.RiskDifference(strata, view.Level)));
        }

        gaps.ForEach(readings.Add);
    }

    private static Reading OddsRatio(GroupingView view, GroupCell group, long[] strata, long counted, long smallest)
    {
        Reading row = Row(view, MeasureNames.AdjustedOddsRatio, group, counted, smallest, "robins_breslow_greenland", MantelHaenszel.OddsRatio(strata, view.Level));
        double p = MantelHaenszel.BreslowDay(strata).P;
        row.HomogeneityP = double.IsNaN(p) ? null : p;
        return row;
    }

    private static Reading Row(GroupingView view, string measure, GroupCell group, long counted, long smallest, string method, Estimate estimate)
    {
        Reading row = view.Comparison(measure, group);
        row.Count = counted;
        row.SmallestCount = smallest;
        row.Method = method;
        if (counted > 0 && !double.IsFinite(estimate.Value))
        {
            row.AddNote("no stratum holds both groups and both decisions");
        }

        view.SetNumbers(row, estimate.Value, estimate.Interval);
        return row;
    }

    private static (long[] Strata, long Counted, long Smallest) Strata(GroupingView view, GroupCell group)
    {
        int count = view.Sums.Layout.Strata;
        long[] strata = new long[count * 4];
        long ofGroup = 0, ofReference = 0;
        for (int s = 0; s < count; s++)
        {
            strata[s * 4] = view.Sums.InStratum(view.Shape, group.Index, s, 1);
            strata[(s * 4) + 1] = view.Sums.InStratum(view.Shape, group.Index, s, 0);
            strata[(s * 4) + 2] = view.Sums.InStratum(view.Shape, view.Reference!.Index, s, 1);
            strata[(s * 4) + 3] = view.Sums.InStratum(view.Shape, view.Reference.Index, s, 0);
            ofGroup += strata[s * 4] + strata[(s * 4) + 1];
            ofReference += strata[(s * 4) + 2] + strata[(s * 4) + 3];
        }

        return (strata, ofGroup + ofReference, Math.Min(ofGroup, ofReference));
    }
}
