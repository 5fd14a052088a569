using Evenhand.Statistics.Intervals;

namespace Evenhand.Monitoring.Measures;

/// <summary>Mean scores, their differences, and how far scores stray from outcomes.</summary>
public sealed class ScoreMeasures : IMeasureFamily
{
    /// <inheritdoc/>
    public void Measure(GroupingView view, ICollection<Reading> readings)
    {
        ArgumentNullException.ThrowIfNull(view);
        ArgumentNullException.ThrowIfNull(readings);
        if (view.Charter.Score is null)
        {
            return;
        }

        foreach (GroupCell group in view.Groups.Concat(view.Set))
        {
            Moments m = view.Sums.ScoreMoments(view.Shape, group.Index);
            Reading row = Sized(view.Row(MeasureNames.MeanScore, group), m, m, "student_t");
            view.SetNumbers(row, m.Mean, MeanInterval.Of(m, view.Level));
            readings.Add(row);
        }

        foreach (GroupCell group in view.Compared())
        {
            (Moments m, Moments r) = Pair(view, group);
            Reading row = Sized(view.Comparison(MeasureNames.MeanScoreGap, group), m, r, "welch");
            view.SetNumbers(row, m.Mean - r.Mean, WelchDifference.Of(m, r, view.Level));
            readings.Add(row);
        }

        foreach (GroupCell group in view.Compared())
        {
            (Moments m, Moments r) = Pair(view, group);
            Reading row = Sized(view.Comparison(MeasureNames.StandardizedMeanDifference, group), m, r, "large_sample");
            Estimate estimate = StandardizedMeanDifference.Of(m, r, view.Level);
            view.SetNumbers(row, estimate.Value, estimate.Interval);
            readings.Add(row);
        }

        if (view.Charter.Outcome is not null)
        {
            MeasureCalibration(view, readings);
        }
    }

    private static void MeasureCalibration(GroupingView view, ICollection<Reading> readings)
    {
        foreach (GroupCell group in view.Compared())
        {
            Moments m = view.Sums.CalibrationMoments(view.Shape, group.Index);
            Moments r = view.Sums.CalibrationMoments(view.Shape, view.Reference!.Index);
            Reading row = Sized(view.Comparison(MeasureNames.CalibrationGap, group), m, r, "welch");
            if (view.Charter.Score is not { Low: 0, High: 1 })
            {
                row.AddNote("the score does not run from 0 to 1: set against an outcome rate it is no probability");
            }

            view.SetNumbers(row, m.Mean - r.Mean, WelchDifference.Of(m, r, view.Level));
            readings.Add(row);
        }
    }

    private static (Moments Group, Moments Reference) Pair(GroupingView view, GroupCell group) =>
        (view.Sums.ScoreMoments(view.Shape, group.Index), view.Sums.ScoreMoments(view.Shape, view.Reference!.Index));

    private static Reading Sized(Reading row, Moments group, Moments reference, string method)
    {
        row.Count = (long)group.Count;
        row.SmallestCount = (long)Math.Min(group.Count, reference.Count);
        row.Method = method;
        return row;
    }
}
