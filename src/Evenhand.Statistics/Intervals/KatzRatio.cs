using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.Intervals;

/// <summary>
/// The log interval for a ratio of independent proportions (Katz, Baptista, Azen and Pike, Obtaining confidence
/// intervals for the risk ratio in cohort studies, Biometrics 34, 1978, method C).
/// </summary>
public static class KatzRatio
{
    /// <summary>The interval of (x1/n1) / (x2/n2).</summary>
    /// <param name="x1">Successes in the first group, 0 … <paramref name="n1"/>.</param>
    /// <param name="n1">Trials in the first group.</param>
    /// <param name="x2">Successes in the second group, 0 … <paramref name="n2"/>.</param>
    /// <param name="n2">Trials in the second group.</param>
    /// <param name="level">Confidence level, strictly between 0 and 1.</param>
    /// <returns>
    /// Positive ends about the ratio on the log scale. NaN ends when a group is empty or either count of successes
    /// is zero: the log has no standard error there. When every trial succeeds in both groups the standard error
    /// is zero and both ends are 1, which says nothing about certainty; <see cref="KoopmanRatio"/> stays sound in
    /// all these cases.
    /// </returns>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative, successes exceed trials, or the level is not inside (0, 1).</exception>
    public static Interval Of(long x1, long n1, long x2, long n2, double level)
    {
        ArgumentChecks.Successes(x1, n1);
        ArgumentChecks.Successes(x2, n2);
        double z = Quantiles.TwoSidedNormal(level);
        if (x1 == 0 || x2 == 0)
        {
            return Interval.Undefined;
        }

        double ratio = (double)x1 / n1 / ((double)x2 / n2);
        double variance = Part(x1, n1) + Part(x2, n2);
        double factor = Math.Exp(z * Math.Sqrt(variance));
        return new Interval(ratio / factor, ratio * factor);
    }

    // 1/x − 1/n without the cancellation at rates near 1.
    private static double Part(long x, long n) => (double)(n - x) / x / n;
}
