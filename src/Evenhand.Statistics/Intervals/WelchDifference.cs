using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.Intervals;

/// <summary>
/// The interval for a difference of two means with unequal variances (Welch, The generalization of 'Student's'
/// problem when several different population variances are involved, Biometrika 34, 1947), with the approximate
/// degrees of freedom of Satterthwaite (Biometrics Bulletin 2, 1946).
/// </summary>
public static class WelchDifference
{
    /// <summary>The interval of the first mean minus the second.</summary>
    /// <param name="m1">Moments of the first group.</param>
    /// <param name="m2">Moments of the second group.</param>
    /// <param name="level">Confidence level, strictly between 0 and 1.</param>
    /// <returns>NaN ends when a group has fewer than two values; zero width when neither group varies.</returns>
    /// <exception cref="ArgumentOutOfRangeException">A count or a variance is negative, or the level is not inside (0, 1).</exception>
    public static Interval Of(in Moments m1, in Moments m2, double level)
    {
        m1.Check(nameof(m1));
        m2.Check(nameof(m2));
        ArgumentChecks.Level(level);
        double first = m1.SquaredError;
        double second = m2.SquaredError;
        double squared = first + second;
        if (double.IsNaN(squared))
        {
            return Interval.Undefined;
        }

        double difference = m1.Mean - m2.Mean;
        if (squared == 0)
        {
            return new Interval(difference, difference);
        }

        // Shares of the total, so that tiny variances do not underflow when squared.
        double share1 = first / squared;
        double share2 = second / squared;
        double df = 1 / ((share1 * share1 / (m1.Count - 1)) + (share2 * share2 / (m2.Count - 1)));
        double reach = Quantiles.TwoSidedStudent(level, df) * Math.Sqrt(squared);
        return new Interval(difference - reach, difference + reach);
    }
}
