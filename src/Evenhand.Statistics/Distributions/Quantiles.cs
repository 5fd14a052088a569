using MathNet.Numerics;

namespace Evenhand.Statistics.Distributions;

/// <summary>Critical values of two-sided intervals: the q with P(−q ≤ X ≤ q) = level.</summary>
public static class Quantiles
{
    private const int StudentSteps = 200;

    // Above this the expansion in 1/df is exact to 1e-13, and the incomplete beta starts to lose digits.
    private const double LargeDegreesOfFreedom = 1e4;

    /// <summary>The two-sided critical value of the standard normal distribution (1.95996… at 0.95).</summary>
    /// <param name="level">Confidence level, strictly between 0 and 1.</param>
    /// <returns>A positive number of standard deviations.</returns>
    /// <exception cref="ArgumentOutOfRangeException"><paramref name="level"/> is not inside (0, 1).</exception>
    public static double TwoSidedNormal(double level)
    {
        ArgumentChecks.Level(level);
        return Math.Sqrt(2) * SpecialFunctions.ErfcInv(1 - level);
    }

    /// <summary>The two-sided critical value of Student's t distribution (12.7062… at 0.95 and one degree of freedom).</summary>
    /// <param name="level">Confidence level, strictly between 0 and 1.</param>
    /// <param name="df">Degrees of freedom, positive, need not be whole; NaN gives NaN, infinity the normal value.</param>
    /// <returns>The critical value, accurate to about 1e-11 relative.</returns>
    /// <remarks>
    /// Up to 10 000 degrees of freedom the regularized incomplete beta function is inverted; above, the
    /// expansion about the normal quantile is used (Abramowitz and Stegun, Handbook of Mathematical
    /// Functions, 1964, 26.7.5), four terms.
    /// </remarks>
    /// <exception cref="ArgumentOutOfRangeException"><paramref name="level"/> is not inside (0, 1), or <paramref name="df"/> is not positive.</exception>
    public static double TwoSidedStudent(double level, double df)
    {
        ArgumentChecks.Level(level);
        ArgumentChecks.Positive(df);
        if (double.IsNaN(df))
        {
            return double.NaN;
        }

        double z = TwoSidedNormal(level);
        return df > LargeDegreesOfFreedom ? ExpandStudent(z, df) : SolveStudent(1 - level, df, z);
    }

    private static double ExpandStudent(double z, double df)
    {
        double s = z * z;
        double first = z * (s + 1) / 4;
        double second = z * (((5 * s) + 16) * s + 3) / 96;
        double third = z * (((((3 * s) + 19) * s) + 17) * s - 15) / 384;
        double fourth = z * (((((((79 * s) + 776) * s) + 1482) * s) - 1920) * s - 945) / 92160;
        return z + ((first + ((second + ((third + (fourth / df)) / df)) / df)) / df);
    }

    // Bisection on log t: the tail falls strictly with t, and few degrees of freedom put t many decades out.
    private static double SolveStudent(double tail, double df, double z)
    {
        double low = Math.Log(z);
        double width = 1;
        while (StudentTail(Math.Exp(low + width), df) > tail)
        {
            low += width;
            width *= 2;
        }

        double high = low + width;
        for (int step = 0; step < StudentSteps; step++)
        {
            double middle = 0.5 * (low + high);
            if (middle <= low || middle >= high)
            {
                break;
            }

            (low, high) = StudentTail(Math.Exp(middle), df) > tail ? (middle, high) : (low, middle);
        }

        return Math.Exp(high);
    }

    // P(|T| > t) = I_x(df/2, 1/2) at x = df/(df + t²); from the other end while x is near 1.
    private static double StudentTail(double t, double df)
    {
        double square = t * t;
        return square < df
            ? 1 - SpecialFunctions.BetaRegularized(0.5, 0.5 * df, square / (df + square))
            : SpecialFunctions.BetaRegularized(0.5 * df, 0.5, df / (df + square));
    }
}
