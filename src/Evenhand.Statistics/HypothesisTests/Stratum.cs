using System.Diagnostics;

namespace Evenhand.Statistics.HypothesisTests;

/// <summary>One two-by-two table of a stratified analysis, as doubles.</summary>
/// <param name="A">Events in the first group.</param>
/// <param name="B">Non-events in the first group.</param>
/// <param name="C">Events in the second group.</param>
/// <param name="D">Non-events in the second group.</param>
internal readonly record struct Stratum(double A, double B, double C, double D)
{
    /// <summary>Cells of one stratum in the flattened list.</summary>
    public const int Cells = 4;

    /// <summary>Members of the first group.</summary>
    public double First => A + B;

    /// <summary>Members of the second group.</summary>
    public double Second => C + D;

    /// <summary>Events in both groups.</summary>
    public double Events => A + C;

    /// <summary>Non-events in both groups.</summary>
    public double NonEvents => B + D;

    /// <summary>All members.</summary>
    public double Total => A + B + C + D;

    /// <summary>True when every margin has members, so that the odds ratio of the stratum can vary.</summary>
    public bool IsInformative => First > 0 && Second > 0 && Events > 0 && NonEvents > 0;

    /// <summary>The table with events and non-events exchanged; its odds ratio is the inverse.</summary>
    public Stratum Exchanged => new(B, A, D, C);

    /// <summary>The table with both rows and columns exchanged; its odds ratio is the same.</summary>
    public Stratum Turned => new(D, C, B, A);

    /// <summary>The stratum at a position of the flattened list.</summary>
    public static Stratum At(ReadOnlySpan<long> strata, int index)
    {
        ReadOnlySpan<long> cells = strata.Slice(index * Cells, Cells);
        return new Stratum(cells[0], cells[1], cells[2], cells[3]);
    }

    /// <summary>The number of strata in a flattened list, after checking it.</summary>
    public static int CountIn(ReadOnlySpan<long> strata)
    {
        if (strata.Length % Cells != 0)
        {
            throw new ArgumentException($"{strata.Length} counts do not fill strata of {Cells} (a, b, c, d each).", nameof(strata));
        }

        foreach (long count in strata)
        {
            ArgumentChecks.Count(count, nameof(strata));
        }

        return strata.Length / Cells;
    }

    /// <summary>
    /// The expected events of the first group with these margins when the odds ratio is <paramref name="ratio"/>, at
    /// most 1, for a table whose first cell is the smaller of its diagonal: the root inside the support of
    /// (1 − ψ) E² + (n2 − m + ψ (n1 + m)) E − ψ n1 m = 0, in the form that adds terms of one sign.
    /// </summary>
    public double FittedEvents(double ratio)
    {
        Debug.Assert(ratio <= 1 && A <= D, "Turn the table first.");
        double linear = D - A + (ratio * (First + Events));
        double constant = ratio * First * Events;
        return 2 * constant / (linear + Math.Sqrt((linear * linear) + (4 * (1 - ratio) * constant)));
    }
}
