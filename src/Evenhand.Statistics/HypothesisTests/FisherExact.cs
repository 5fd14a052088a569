using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.HypothesisTests;

/// <summary>
/// Fisher's exact test of a two-by-two table (Fisher, Statistical Methods for Research Workers, 5th edition, 1934,
/// section 21.02), two-sided by summing all tables with the observed margins that are no more probable.
/// </summary>
/// <remarks>
/// The hypergeometric probabilities rise to one mode and fall again, so the tables to be summed are two tails.
/// Bisection finds where each begins; from there every next probability is a rational multiple of the last, and a
/// tail is left once the rest cannot change the sum. Cost: a few standard deviations' worth of terms; relative
/// accuracy about 1e-12 for counts in the millions.
/// </remarks>
public static class FisherExact
{
    // Tables equal in probability but for rounding count as ties: common practice, no source.
    private const double TieTolerance = 1e-7;
    private const double Negligible = 1e-17;

    /// <summary>The two-sided p-value.</summary>
    /// <param name="a">Events in the first group.</param>
    /// <param name="b">Non-events in the first group.</param>
    /// <param name="c">Events in the second group.</param>
    /// <param name="d">Non-events in the second group.</param>
    /// <returns>A probability; 1 when a margin is zero, as the table is then the only one with these margins.</returns>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative.</exception>
    public static double TwoSided(long a, long b, long c, long d)
    {
        ArgumentChecks.Count(a);
        ArgumentChecks.Count(b);
        ArgumentChecks.Count(c);
        ArgumentChecks.Count(d);
        var tables = new Hypergeometric(a + b, c + d, a + c);
        double limit = tables.Log(a) + NearOne.LogOnePlus(TieTolerance);
        long mode = tables.Mode;
        if (tables.Log(mode) <= limit)
        {
            return 1;
        }

        return Math.Min(1, LeftTail(tables, mode, limit) + RightTail(tables, mode, limit));
    }

    // Sums the tables left of the mode whose log probability does not exceed the limit.
    private static double LeftTail(in Hypergeometric tables, long mode, double limit)
    {
        long low = tables.Lowest - 1;
        long high = mode;
        while (high - low > 1)
        {
            long middle = low + ((high - low) / 2);
            (low, high) = tables.Log(middle) <= limit ? (middle, high) : (low, middle);
        }

        if (low < tables.Lowest)
        {
            return 0;
        }

        double sum = 1;
        double term = 1;
        for (long x = low; x > tables.Lowest; x--)
        {
            double ratio = 1 / tables.Step(x - 1);
            term *= ratio;
            sum += term;
            if (term * ratio <= Negligible * sum * (1 - ratio))
            {
                break;
            }
        }

        return Math.Exp(tables.Log(low)) * sum;
    }

    // A table and the same table with its columns exchanged have the same probability, which turns right into left.
    private static double RightTail(in Hypergeometric tables, long mode, double limit) =>
        LeftTail(tables.Mirrored, tables.FirstGroup - mode, limit);
}
