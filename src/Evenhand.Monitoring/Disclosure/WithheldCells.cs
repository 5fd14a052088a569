using Evenhand.Monitoring.Measures;

namespace Evenhand.Monitoring.Disclosure;

/// <summary>The cells of one snapshot whose sums must not leave the store, by window, slice and grouping.</summary>
/// <param name="minimum">The charter's <c>minimum_cell</c>; 0 withholds nothing.</param>
public sealed class WithheldCells(int minimum)
{
    private readonly HashSet<(string Window, string? Slice, string? Grouping, int Cell)> _cells = [];

    /// <summary>Records below which a cell is withheld.</summary>
    public int Minimum { get; } = minimum;

    /// <summary>Withholds a cell.</summary>
    public void Add(string window, string? slice, string? grouping, int cell) => _cells.Add((window, slice, grouping, cell));

    /// <summary>Whether a cell is withheld.</summary>
    public bool Contains(string window, string? slice, string? grouping, int cell) => _cells.Contains((window, slice, grouping, cell));

    /// <summary>Takes the numbers away from every reading that rests on a withheld cell or on too few records.</summary>
    public void Apply(IEnumerable<Reading> readings)
    {
        ArgumentNullException.ThrowIfNull(readings);
        foreach (Reading reading in readings)
        {
            if (IsWithheld(reading))
            {
                reading.Suppress();
            }
        }
    }

    /// <summary>Whether a reading rests on a withheld cell or on too few records.</summary>
    public bool IsWithheld(Reading reading)
    {
        ArgumentNullException.ThrowIfNull(reading);
        return Minimum > 0
            && (Math.Min(reading.SmallestCount, reading.Count ?? long.MaxValue) < Minimum
                || Contains(reading.Window, reading.Slice, reading.Grouping, reading.CellIndex)
                || (reading.ReferenceIndex >= 0 && Contains(reading.Window, reading.Slice, reading.Grouping, reading.ReferenceIndex)));
    }
}
