namespace Evenhand.Statistics.Distributions;

/// <summary>
/// Natural logarithms of discrete probabilities by Loader's saddle-point form (Fast and Accurate Computation
/// of Binomial Probabilities, 2000): the absolute error stays near 1e-13 for counts of millions, where
/// differences of log factorials lose six digits.
/// </summary>
internal static class LogProbability
{
    /// <summary>ln P(X = x) for X binomial over n trials with success probability p and q = 1 − p given separately.</summary>
    public static double Binomial(long x, long n, double p, double q)
    {
        if (p == 0 || q == 0)
        {
            return (p == 0 ? x : n - x) == 0 ? 0 : double.NegativeInfinity;
        }

        if (x == 0)
        {
            return n * (p < 0.5 ? NearOne.LogOnePlus(-p) : Math.Log(q));
        }

        if (x == n)
        {
            return n * (q < 0.5 ? NearOne.LogOnePlus(-q) : Math.Log(p));
        }

        double failures = n - x;
        double correction = Stirling.Error(n) - Stirling.Error(x) - Stirling.Error(n - x);
        double deviance = Stirling.Deviance(x, n * p) + Stirling.Deviance(failures, n * q);
        return correction - deviance - (0.5 * (Math.Log(2 * Math.PI) + Math.Log(x) + NearOne.LogOnePlus(-(double)x / n)));
    }

    /// <summary>
    /// ln P(X = x) for X the number of marked items in <paramref name="drawn"/> draws without replacement out of
    /// <paramref name="marked"/> marked and <paramref name="unmarked"/> unmarked ones; x inside the support.
    /// </summary>
    public static double Hypergeometric(long x, long marked, long unmarked, long drawn)
    {
        long total = marked + unmarked;
        if (total == 0)
        {
            return 0;
        }

        // Any p gives the same answer; the sampling fraction keeps all three deviances small.
        double p = (double)drawn / total;
        double q = (double)(total - drawn) / total;
        return Binomial(x, marked, p, q) + Binomial(drawn - x, unmarked, p, q) - Binomial(drawn, total, p, q);
    }
}
