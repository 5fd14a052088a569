using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.Intervals;

/// <summary>
/// Koopman's score statistic of the hypothesis p1 = φ p2, signed and less a target, as a function of ln φ:
/// (p̂1 − φ p̂2) / √(p̃1 q̃1/n1 + φ² p̃2 q̃2/n2) with p̃ the maximum-likelihood rates under the hypothesis.
/// </summary>
/// <remarks>
/// p̃2 is the smaller root of N φ p² − b p + X = 0 with X = x1 + x2 and b = φ (n1 + x2) + x1 + n2. Written with the
/// failures f1 and f2 its discriminant is a square plus 4 φ f1 f2, and both failure rates come from φ − 1 and f1 + f2; so
/// neither rates near 0 nor rates near 1 lose digits that the end points would show.
/// </remarks>
internal readonly struct RatioScore(long x1, long n1, long x2, long n2, double target) : IFallingFunction
{
    /// <inheritdoc />
    public double At(double t)
    {
        double ratio = Math.Exp(t);
        double excess = NearOne.ExpMinusOne(t);
        double numerator = ((((double)x1 * n2) - ((double)x2 * n1)) / n1 / n2) - (excess * x2 / n2);

        // Exactly at the estimate the numerator is zero, and so may the variance be.
        return (numerator == 0 ? 0 : numerator / Math.Sqrt(Variance(ratio, excess))) - target;
    }

    private double Variance(double ratio, double excess)
    {
        double f1 = n1 - x1;
        double f2 = n2 - x2;
        double successes = (double)x1 + x2;
        double shift = excess * ((double)n1 + x2);
        double inner = shift + f1 - f2;
        double root = Math.Sqrt((inner * inner) + (4 * ratio * f1 * f2));
        double divisor = (ratio * ((double)n1 + x2)) + x1 + n2 + root;

        double p2 = 2 * successes / divisor;
        double q2 = Math.Max(0, shift + f1 + f2 + root) / divisor;
        double q1 = Math.Max(0, (ratio * (f1 + f2)) - (excess * ((double)n2 + x1)) + root) / divisor;
        return (ratio * p2 * q1 / n1) + (ratio * ratio * p2 * q2 / n2);
    }
}
