using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.HypothesisTests;

/// <summary>
/// Exact one-sided binomial probabilities, accurate far into the tail: the probabilities from the cut outwards are
/// summed, the first by Loader's saddle-point form (Fast and Accurate Computation of Binomial Probabilities, 2000).
/// </summary>
public static class BinomialTail
{
    /// <summary>P(X ≤ x) for X successes in n trials.</summary>
    /// <param name="x">Successes observed, 0 … <paramref name="n"/>.</param>
    /// <param name="n">Trials; with none the probability is 1.</param>
    /// <param name="p">Success probability of one trial, 0 … 1; NaN gives NaN.</param>
    /// <returns>A probability.</returns>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative, x exceeds n, or p is outside [0, 1].</exception>
    public static double Lower(long x, long n, double p)
    {
        ArgumentChecks.Successes(x, n);
        ArgumentChecks.Probability(p);
        return double.IsNaN(p) ? double.NaN : BinomialSum.Upper(n - x, n, 1 - p, p);
    }

    /// <summary>P(X ≥ x) for X successes in n trials.</summary>
    /// <param name="x">Successes observed, 0 … <paramref name="n"/>.</param>
    /// <param name="n">Trials; with none the probability is 1.</param>
    /// <param name="p">Success probability of one trial, 0 … 1; NaN gives NaN.</param>
    /// <returns>A probability.</returns>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative, x exceeds n, or p is outside [0, 1].</exception>
    public static double Upper(long x, long n, double p)
    {
        ArgumentChecks.Successes(x, n);
        ArgumentChecks.Probability(p);
        return double.IsNaN(p) ? double.NaN : BinomialSum.Upper(x, n, p, 1 - p);
    }
}
