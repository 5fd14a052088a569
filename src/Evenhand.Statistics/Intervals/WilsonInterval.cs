using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.Intervals;

/// <summary>
/// Wilson's score interval for one proportion, without continuity correction (Wilson, Probable inference, the
/// law of succession, and statistical inference, JASA 22, 1927): all p₀ with |p − p₀| ≤ z √(p₀(1 − p₀)/n).
/// </summary>
public static class WilsonInterval
{
    /// <summary>The interval for <paramref name="successes"/> out of <paramref name="n"/>.</summary>
    /// <param name="successes">Successes, 0 … <paramref name="n"/>.</param>
    /// <param name="n">Trials; zero gives NaN ends.</param>
    /// <param name="level">Confidence level, strictly between 0 and 1.</param>
    /// <returns>Ends within [0, 1]. No success: the lower end is exactly 0. No failure: the upper end is exactly 1.</returns>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative, successes exceed trials, or the level is not inside (0, 1).</exception>
    public static Interval Of(long successes, long n, double level)
    {
        ArgumentChecks.Successes(successes, n);
        double z = Quantiles.TwoSidedNormal(level);
        return n == 0 ? Interval.Undefined : Solve((double)successes / n, (double)(n - successes) / n, n, z);
    }

    /// <summary>The interval for a proportion with an effective number of trials, as weighted counts have.</summary>
    /// <param name="p">The proportion, 0 … 1; NaN gives NaN ends.</param>
    /// <param name="n">Effective trials, finite and not negative, need not be whole; zero or NaN gives NaN ends.</param>
    /// <param name="level">Confidence level, strictly between 0 and 1.</param>
    /// <returns>Ends within [0, 1]; exactly 0 below p = 0 and exactly 1 above p = 1.</returns>
    /// <exception cref="ArgumentOutOfRangeException">p is outside [0, 1], n is negative or infinite, or the level is not inside (0, 1).</exception>
    public static Interval Of(double p, double n, double level)
    {
        ArgumentChecks.Probability(p);
        if (n < 0 || double.IsInfinity(n))
        {
            throw new ArgumentOutOfRangeException(nameof(n), n, "An effective number of trials is finite and not negative.");
        }

        double z = Quantiles.TwoSidedNormal(level);
        return n > 0 && !double.IsNaN(p) ? Solve(p, 1 - p, n, z) : Interval.Undefined;
    }

    // Each end is written as a quotient of positive terms (the product of the roots of the quadratic over the
    // other root), so that rates of one in a million lose no digits and the extremes are exact.
    private static Interval Solve(double p, double q, double n, double z)
    {
        double share = z * z / n;
        double reach = Math.Sqrt(share * ((p * q) + (share / 4)));
        double low = p * p / (p + (share / 2) + reach);
        double high = 1 - (q * q / (q + (share / 2) + reach));
        return new Interval(low, high);
    }
}
