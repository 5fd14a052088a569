using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.Intervals;

/// <summary>
/// The logit interval for an odds ratio (Woolf, On estimating the relation between blood group and disease, Annals
/// of Human Genetics 19, 1955).
/// </summary>
public static class WoolfOddsRatio
{
    /// <summary>The interval of (a d) / (b c).</summary>
    /// <param name="a">Events in the first group.</param>
    /// <param name="b">Non-events in the first group.</param>
    /// <param name="c">Events in the second group.</param>
    /// <param name="d">Non-events in the second group.</param>
    /// <param name="level">Confidence level, strictly between 0 and 1.</param>
    /// <returns>Positive ends about the odds ratio on the log scale; NaN ends when any cell is zero (no half is added).</returns>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative, or the level is not inside (0, 1).</exception>
    public static Interval Of(long a, long b, long c, long d, double level)
    {
        ArgumentChecks.Count(a);
        ArgumentChecks.Count(b);
        ArgumentChecks.Count(c);
        ArgumentChecks.Count(d);
        double z = Quantiles.TwoSidedNormal(level);
        if (a == 0 || b == 0 || c == 0 || d == 0)
        {
            return Interval.Undefined;
        }

        double ratio = (double)a / b * ((double)d / c);
        double factor = Math.Exp(z * Math.Sqrt((1.0 / a) + (1.0 / b) + (1.0 / c) + (1.0 / d)));
        return new Interval(ratio / factor, ratio * factor);
    }
}
