using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.Intervals;

/// <summary>
/// The score interval for a ratio of independent proportions (Koopman, Confidence intervals for the ratio of two
/// binomial proportions, Biometrics 40, 1984): all ratios the score test does not reject, with the variance taken
/// at the rates that are most likely under that ratio and no correction of the variance.
/// </summary>
public static class KoopmanRatio
{
    /// <summary>The interval of (x1/n1) / (x2/n2).</summary>
    /// <param name="x1">Successes in the first group, 0 … <paramref name="n1"/>.</param>
    /// <param name="n1">Trials in the first group.</param>
    /// <param name="x2">Successes in the second group, 0 … <paramref name="n2"/>.</param>
    /// <param name="n2">Trials in the second group.</param>
    /// <param name="level">Confidence level, strictly between 0 and 1.</param>
    /// <returns>
    /// Ends in [0, +∞]; NaN ends when a group is empty. No success in the first group: the lower end is 0, the
    /// upper one still comes from the score test. No success in the second: the upper end is +∞. In neither: 0 and
    /// +∞. Every trial a success in both: an ordinary interval about 1.
    /// </returns>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative, successes exceed trials, or the level is not inside (0, 1).</exception>
    public static Interval Of(long x1, long n1, long x2, long n2, double level)
    {
        ArgumentChecks.Successes(x1, n1);
        ArgumentChecks.Successes(x2, n2);
        double z = Quantiles.TwoSidedNormal(level);
        if (n1 == 0 || n2 == 0)
        {
            return Interval.Undefined;
        }

        // Half a success each keeps the starting point finite; it has no part in the solution.
        double start = Math.Log((x1 + 0.5) / (n1 + 0.5)) - Math.Log((x2 + 0.5) / (n2 + 0.5));
        double low = x1 == 0 ? 0 : Math.Exp(MonotoneRoot.Find(new RatioScore(x1, n1, x2, n2, z), start));
        double high = x2 == 0 ? double.PositiveInfinity : Math.Exp(MonotoneRoot.Find(new RatioScore(x1, n1, x2, n2, -z), start));
        return new Interval(low, high);
    }
}
