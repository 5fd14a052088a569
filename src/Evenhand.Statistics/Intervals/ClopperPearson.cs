using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.Intervals;

/// <summary>
/// The exact interval for one proportion from the two binomial tails (Clopper and Pearson, The use of confidence
/// or fiducial limits illustrated in the case of the binomial, Biometrika 26, 1934).
/// </summary>
public static class ClopperPearson
{
    /// <summary>The interval for <paramref name="successes"/> out of <paramref name="n"/>.</summary>
    /// <param name="successes">Successes, 0 … <paramref name="n"/>.</param>
    /// <param name="n">Trials; zero gives NaN ends.</param>
    /// <param name="level">Confidence level, strictly between 0 and 1; coverage is at least this.</param>
    /// <returns>Ends within [0, 1]. No success: the lower end is exactly 0. No failure: the upper end is exactly 1.</returns>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative, successes exceed trials, or the level is not inside (0, 1).</exception>
    public static Interval Of(long successes, long n, double level)
    {
        ArgumentChecks.Successes(successes, n);
        ArgumentChecks.Level(level);
        if (n == 0)
        {
            return Interval.Undefined;
        }

        double tail = (1 - level) / 2;
        double low = successes == 0 ? 0 : LowerEnd(successes, n, tail);
        double high = successes == n ? 1 : 1 - LowerEnd(n - successes, n, tail);
        return new Interval(low, high);
    }

    // The rate at which `successes` or more have probability `tail`; solved on the logit.
    private static double LowerEnd(long successes, long n, double tail)
    {
        double start = Math.Log((successes - 0.5) / (n - successes + 0.5));
        double logit = MonotoneRoot.Find(new TailExcess(successes, n, tail), start);
        return 1 / (1 + Math.Exp(-logit));
    }

    private readonly struct TailExcess(long successes, long n, double tail) : IFallingFunction
    {
        public double At(double t) =>
            tail - BinomialSum.Upper(successes, n, 1 / (1 + Math.Exp(-t)), 1 / (1 + Math.Exp(t)));
    }
}
