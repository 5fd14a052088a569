using MathNet.Numerics;

namespace Evenhand.Statistics.Distributions;

/// <summary>Tail probabilities that keep their relative accuracy far out (about 1e-12 down to 1e-300).</summary>
public static class Tails
{
    /// <summary>P(|Z| ≥ |z|) for a standard normal Z.</summary>
    /// <param name="z">Standard deviations, either sign; NaN gives NaN.</param>
    /// <returns>A probability; 0 once it falls below the smallest double.</returns>
    public static double TwoSidedNormalTail(double z) => SpecialFunctions.Erfc(Math.Abs(z) / Math.Sqrt(2));

    /// <summary>P(X ≥ x) for a chi-square variable X.</summary>
    /// <param name="x">The statistic; NaN gives NaN, zero or less gives 1.</param>
    /// <param name="df">Degrees of freedom, positive; NaN gives NaN.</param>
    /// <returns>A probability; 0 once it falls below the smallest double.</returns>
    /// <exception cref="ArgumentOutOfRangeException"><paramref name="df"/> is zero or negative.</exception>
    public static double ChiSquareTail(double x, double df)
    {
        ArgumentChecks.Positive(df);
        if (double.IsNaN(x) || double.IsNaN(df))
        {
            return double.NaN;
        }

        if (x <= 0)
        {
            return 1;
        }

        if (double.IsPositiveInfinity(x))
        {
            return 0;
        }

        return df == 1 ? SpecialFunctions.Erfc(Math.Sqrt(0.5 * x)) : SpecialFunctions.GammaUpperRegularized(0.5 * df, 0.5 * x);
    }
}
