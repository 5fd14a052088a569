using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.Intervals;

/// <summary>
/// Koopman's score statistic of the hypothesis p1 = φ p2, signed and less a target, as a function of ln φ:
/// (p̂1 − φ p̂2) / √(p̃1 q̃1/n1 + φ² p̃2 q̃2/n2) with p̃ the maximum-likelihood rates under the hypothesis.
/// </summary>
internal readonly struct RatioScore(long x1, long n1, long x2, long n2, double target) : IFallingFunction
{
    /// <inheritdoc />
    public double At(double t)
    {
        double ratio = Math.Exp(t);
        double numerator = ((double)x1 / n1) - (ratio * x2 / n2);
        double p2 = ConstrainedSecondRate(ratio);
        double p1 = Math.Min(1, ratio * p2);
        double variance = (p1 * (1 - p1) / n1) + (ratio * ratio * p2 * (1 - p2) / n2);

        // Exactly at the estimate the numerator is zero, and so may the variance be.
        return (numerator == 0 ? 0 : numerator / Math.Sqrt(variance)) - target;
    }

    // The smaller root of N φ p² − (φ (n1 + x2) + x1 + n2) p + x1 + x2 = 0, in the form that does not cancel.
    private double ConstrainedSecondRate(double ratio)
    {
        double successes = (double)x1 + x2;
        double linear = (ratio * ((double)n1 + x2)) + x1 + n2;
        double discriminant = (linear * linear) - (4 * ratio * ((double)n1 + n2) * successes);
        return Math.Min(1, 2 * successes / (linear + Math.Sqrt(Math.Max(0, discriminant))));
    }
}
