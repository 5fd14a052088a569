using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.Intervals;

/// <summary>
/// The difference of two means in units of the root of the average variance, (m1 − m2) / √((s1² + s2²)/2), with
/// the large-sample interval for unequal variances of Bonett (Confidence intervals for standardized linear
/// contrasts of means, Psychological Methods 13, 2008).
/// </summary>
/// <remarks>
/// With s² the average variance, d the estimate and f = n − 1, the squared standard error is
/// d² (s1⁴/f1 + s2⁴/f2) / (8 s⁴) + (s1²/f1 + s2²/f2) / s². No small-sample correction is applied.
/// </remarks>
public static class StandardizedMeanDifference
{
    /// <summary>The standardized difference, first minus second, with its interval.</summary>
    /// <param name="m1">Moments of the first group.</param>
    /// <param name="m2">Moments of the second group.</param>
    /// <param name="level">Confidence level, strictly between 0 and 1.</param>
    /// <returns>A pure number; NaN throughout when a group has fewer than two values or neither group varies.</returns>
    /// <exception cref="ArgumentOutOfRangeException">A count or a variance is negative, or the level is not inside (0, 1).</exception>
    public static Estimate Of(in Moments m1, in Moments m2, double level)
    {
        m1.Check(nameof(m1));
        m2.Check(nameof(m2));
        double z = Quantiles.TwoSidedNormal(level);
        double average = (m1.Variance + m2.Variance) / 2;
        if (m1.Count < 2 || m2.Count < 2 || !(average > 0))
        {
            return Estimate.Undefined;
        }

        double value = (m1.Mean - m2.Mean) / Math.Sqrt(average);
        double share1 = m1.Variance / average;
        double share2 = m2.Variance / average;
        double scaleError = ((share1 * share1 / (m1.Count - 1)) + (share2 * share2 / (m2.Count - 1))) / 8;
        double meanError = (share1 / (m1.Count - 1)) + (share2 / (m2.Count - 1));
        double reach = z * Math.Sqrt((value * value * scaleError) + meanError);
        return new Estimate(value, new Interval(value - reach, value + reach));
    }
}
