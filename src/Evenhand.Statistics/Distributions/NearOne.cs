namespace Evenhand.Statistics.Distributions;

/// <summary>
/// ln(1 + x) and eˣ − 1 to full precision for small x. The runtime's LogP1 and ExpM1 round 1 + x first, and
/// MathNet's Log1p is good to 1e-9 only; this is Kahan's division by the rounding that happened (Higham,
/// Accuracy and Stability of Numerical Algorithms, 2nd edition, 2002, section 1.14.1).
/// </summary>
internal static class NearOne
{
    /// <summary>ln(1 + x) for x ≥ −1.</summary>
    public static double LogOnePlus(double x)
    {
        double sum = 1 + x;
        return sum == 1 ? x : sum == 0 ? double.NegativeInfinity : Math.Log(sum) * (x / (sum - 1));
    }

    /// <summary>eˣ − 1.</summary>
    public static double ExpMinusOne(double x)
    {
        double power = Math.Exp(x);
        return power == 1 ? x : Math.Abs(x) > 1 ? power - 1 : (power - 1) * (x / Math.Log(power));
    }
}
