namespace Evenhand.Statistics.Intervals;

/// <summary>Count, mean and sample variance of one group's values: all that the intervals on means need.</summary>
/// <param name="Count">Number of values, not negative; may be an effective (fractional) count.</param>
/// <param name="Mean">Arithmetic mean, in the unit of the values; NaN when there is none.</param>
/// <param name="Variance">Sample variance with divisor n − 1, in the unit squared; NaN when the count is below 2.</param>
public readonly record struct Moments(double Count, double Mean, double Variance)
{
    /// <summary>The moments of a list of values, by two passes.</summary>
    /// <param name="values">The values, in any order; a NaN or an infinity among them makes mean and variance NaN.</param>
    /// <returns>Mean NaN for an empty list, variance NaN below two values.</returns>
    /// <remarks>
    /// Corrected two-pass algorithm (Chan, Golub and LeVeque, Algorithms for computing the sample variance,
    /// The American Statistician 37, 1983): the sum of the residuals repairs the rounding of the mean.
    /// </remarks>
    public static Moments Of(ReadOnlySpan<double> values)
    {
        int n = values.Length;
        if (n == 0)
        {
            return new Moments(0, double.NaN, double.NaN);
        }

        double sum = 0;
        foreach (double value in values)
        {
            sum += value;
        }

        double mean = sum / n;
        double residuals = 0;
        double squares = 0;
        foreach (double value in values)
        {
            double residual = value - mean;
            residuals += residual;
            squares += residual * residual;
        }

        double variance = n < 2 ? double.NaN : (squares - (residuals * residuals / n)) / (n - 1);
        return new Moments(n, mean + (residuals / n), variance);
    }

    /// <summary>Throws if the count or the variance is negative, naming the parameter that holds them.</summary>
    internal void Check(string name)
    {
        if (Count < 0 || Variance < 0)
        {
            throw new ArgumentOutOfRangeException(name, this, "Neither the count nor the variance of a group can be negative.");
        }
    }

    /// <summary>The squared standard error of the mean; NaN when the variance is undefined.</summary>
    internal double SquaredError => Count < 2 ? double.NaN : Variance / Count;
}
