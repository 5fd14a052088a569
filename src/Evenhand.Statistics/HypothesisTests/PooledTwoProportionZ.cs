using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.HypothesisTests;

/// <summary>
/// The z test of two independent proportions with the variance pooled under the hypothesis of equal rates and no
/// continuity correction; Z² is Pearson's chi-square of the two-by-two table (Fleiss, Statistical Methods for
/// Rates and Proportions, 2nd edition, 1981, section 2.1).
/// </summary>
public static class PooledTwoProportionZ
{
    /// <summary>Tests x1/n1 against x2/n2.</summary>
    /// <param name="x1">Successes in the first group, 0 … <paramref name="n1"/>.</param>
    /// <param name="n1">Trials in the first group.</param>
    /// <param name="x2">Successes in the second group, 0 … <paramref name="n2"/>.</param>
    /// <param name="n2">Trials in the second group.</param>
    /// <returns>NaN when a group is empty, or when all trials of both groups succeed or all fail (no variance).</returns>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative or successes exceed trials.</exception>
    public static TwoProportionZ Test(long x1, long n1, long x2, long n2)
    {
        ArgumentChecks.Successes(x1, n1);
        ArgumentChecks.Successes(x2, n2);
        double total = (double)n1 + n2;
        double pooled = ((double)x1 + x2) / total;
        double failing = ((double)(n1 - x1) + (n2 - x2)) / total;
        double variance = pooled * failing * ((1.0 / n1) + (1.0 / n2));
        if (n1 == 0 || n2 == 0 || variance == 0)
        {
            return new TwoProportionZ(double.NaN, double.NaN);
        }

        double z = (((double)x1 / n1) - ((double)x2 / n2)) / Math.Sqrt(variance);
        return new TwoProportionZ(z, Tails.TwoSidedNormalTail(z));
    }
}
