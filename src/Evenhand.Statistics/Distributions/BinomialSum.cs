namespace Evenhand.Statistics.Distributions;

/// <summary>Exact binomial tails by summing probabilities from the cut outwards.</summary>
internal static class BinomialSum
{
    // The rest of a geometrically bounded tail below this share of the sum changes no digit of it.
    private const double Negligible = 1e-17;

    /// <summary>P(X ≥ x) for n trials with success probability p and q = 1 − p given separately; any x.</summary>
    public static double Upper(long x, long n, double p, double q)
    {
        if (x <= 0)
        {
            return 1;
        }

        if (x > n)
        {
            return 0;
        }

        // Terms fall from the cut outwards only beyond the mode; otherwise the other tail is the short sum.
        return x > (n + 1.0) * p ? Math.Min(1, Sum(x, n, p, q)) : 1 - Math.Min(1, Sum(n - x + 1, n, q, p));
    }

    private static double Sum(long x, long n, double p, double q)
    {
        double odds = p / q;
        double sum = 1;
        double term = 1;
        for (long k = x; k < n; k++)
        {
            double ratio = (double)(n - k) / (k + 1) * odds;
            term *= ratio;
            sum += term;
            if (term * ratio <= Negligible * sum * (1 - ratio))
            {
                break;
            }
        }

        return Math.Exp(LogProbability.Binomial(x, n, p, q)) * sum;
    }
}
