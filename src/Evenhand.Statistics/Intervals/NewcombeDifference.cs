namespace Evenhand.Statistics.Intervals;

/// <summary>
/// Newcombe's hybrid score interval for a difference of independent proportions, without continuity correction
/// (method 10 of Newcombe, Interval estimation for the difference between independent proportions, Statistics in
/// Medicine 17, 1998).
/// </summary>
public static class NewcombeDifference
{
    /// <summary>The interval of x1/n1 − x2/n2.</summary>
    /// <param name="x1">Successes in the first group, 0 … <paramref name="n1"/>.</param>
    /// <param name="n1">Trials in the first group.</param>
    /// <param name="x2">Successes in the second group, 0 … <paramref name="n2"/>.</param>
    /// <param name="n2">Trials in the second group.</param>
    /// <param name="level">Confidence level, strictly between 0 and 1.</param>
    /// <returns>
    /// Ends within [−1, 1]; NaN ends when a group is empty. Zero cells need no special case: the interval keeps
    /// its width at 0 and at 1.
    /// </returns>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative, successes exceed trials, or the level is not inside (0, 1).</exception>
    public static Interval Of(long x1, long n1, long x2, long n2, double level)
    {
        ArgumentChecks.Successes(x1, n1);
        ArgumentChecks.Successes(x2, n2);
        Interval first = WilsonInterval.Of(x1, n1, level);
        Interval second = WilsonInterval.Of(x2, n2, level);
        return n1 == 0 || n2 == 0
            ? Interval.Undefined
            : Mover.Difference((double)x1 / n1, first, (double)x2 / n2, second);
    }
}
