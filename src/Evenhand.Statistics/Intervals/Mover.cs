namespace Evenhand.Statistics.Intervals;

/// <summary>
/// Method of variance estimates recovery: an interval for a difference from the intervals of its two parts
/// (Zou and Donner, Construction of confidence limits about effect measures: a general approach, Statistics in
/// Medicine 27, 2008).
/// </summary>
public static class Mover
{
    /// <summary>The interval of <paramref name="estimate1"/> − <paramref name="estimate2"/> for independent estimates.</summary>
    /// <param name="estimate1">The first estimate.</param>
    /// <param name="interval1">Its interval, at the level wanted for the difference.</param>
    /// <param name="estimate2">The second estimate, in the same unit.</param>
    /// <param name="interval2">Its interval, at the same level.</param>
    /// <returns>The interval of the difference; an end is NaN when a part it needs is NaN, infinite when that part is unbounded.</returns>
    public static Interval Difference(double estimate1, Interval interval1, double estimate2, Interval interval2) =>
        Difference(estimate1, interval1, estimate2, interval2, correlation: 0);

    /// <summary>The interval of <paramref name="estimate1"/> − <paramref name="estimate2"/> for correlated estimates.</summary>
    /// <param name="estimate1">The first estimate.</param>
    /// <param name="interval1">Its interval, at the level wanted for the difference.</param>
    /// <param name="estimate2">The second estimate, in the same unit.</param>
    /// <param name="interval2">Its interval, at the same level.</param>
    /// <param name="correlation">Correlation of the two estimates, −1 … 1; NaN gives NaN ends.</param>
    /// <returns>The interval of the difference; NaN ends as for independent estimates.</returns>
    /// <exception cref="ArgumentOutOfRangeException">The correlation is outside [−1, 1].</exception>
    public static Interval Difference(double estimate1, Interval interval1, double estimate2, Interval interval2, double correlation)
    {
        if (correlation < -1 || correlation > 1)
        {
            throw new ArgumentOutOfRangeException(nameof(correlation), correlation, "A correlation lies between -1 and 1.");
        }

        double difference = estimate1 - estimate2;
        double below = Reach(estimate1 - interval1.Low, interval2.High - estimate2, correlation);
        double above = Reach(interval1.High - estimate1, estimate2 - interval2.Low, correlation);
        return new Interval(difference - below, difference + above);
    }

    private static double Reach(double first, double second, double correlation)
    {
        if (correlation == 0)
        {
            return Math.Sqrt((first * first) + (second * second));
        }

        // A square plus a non-negative rest: rounding cannot push the radicand below zero.
        double along = first - (correlation * second);
        return Math.Sqrt((along * along) + ((1 - (correlation * correlation)) * second * second));
    }
}
