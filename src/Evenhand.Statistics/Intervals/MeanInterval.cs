using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.Intervals;

/// <summary>The interval for one mean by Student's t distribution (Student, The probable error of a mean, Biometrika 6, 1908).</summary>
public static class MeanInterval
{
    /// <summary>Mean ± t · √(variance / count) with count − 1 degrees of freedom.</summary>
    /// <param name="moments">The group's moments.</param>
    /// <param name="level">Confidence level, strictly between 0 and 1.</param>
    /// <returns>NaN ends below two values or where a moment is NaN; zero width when all values are equal.</returns>
    /// <exception cref="ArgumentOutOfRangeException">The count or the variance is negative, or the level is not inside (0, 1).</exception>
    public static Interval Of(in Moments moments, double level)
    {
        moments.Check(nameof(moments));
        ArgumentChecks.Level(level);
        double squared = moments.SquaredError;
        if (double.IsNaN(squared))
        {
            return Interval.Undefined;
        }

        double reach = Quantiles.TwoSidedStudent(level, moments.Count - 1) * Math.Sqrt(squared);
        return new Interval(moments.Mean - reach, moments.Mean + reach);
    }
}
