using Evenhand.Monitoring.Measures;

namespace Evenhand.Monitoring.Disclosure;

/// <summary>The parts of one snapshot that must not leave the store, by window, slice, grouping and cell.</summary>
/// <param name="minimum">The charter's <c>minimum_cell</c>; 0 withholds nothing.</param>
public sealed class WithheldCells(int minimum)
{
    /// <summary>The cell that stands for a whole grouping.</summary>
    public const int WholeGrouping = -1;

    private readonly HashSet<(WithheldPart Part, string Window, string? Slice, string? Grouping, int Cell)> _cells = [];

    /// <summary>Records below which a cell is withheld.</summary>
    public int Minimum { get; } = minimum;

    /// <summary>Withholds a cell or a part of it.</summary>
    public void Add(string window, string? slice, string? grouping, int cell, WithheldPart part = WithheldPart.All) =>
        _cells.Add((part, window, slice, grouping, cell));

    /// <summary>Whether a part of a cell, or the whole of it, is withheld.</summary>
    public bool Contains(string window, string? slice, string? grouping, int cell, WithheldPart part = WithheldPart.All) =>
        _cells.Contains((WithheldPart.All, window, slice, grouping, cell))
        || (part != WithheldPart.All && _cells.Contains((part, window, slice, grouping, cell)));

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
            else if (Contains(reading.Window, reading.Slice, reading.Grouping, WholeGrouping, WithheldPart.KnownShare))
            {
                reading.KnownShare = null;
            }
        }
    }

    /// <summary>Whether a reading rests on a withheld cell or on too few records.</summary>
    /// <param name="reading">The reading.</param>
    /// <param name="window">The window under which its cells are withheld, where it is not the reading's own.</param>
    public bool IsWithheld(Reading reading, string? window = null)
    {
        ArgumentNullException.ThrowIfNull(reading);
        return Minimum > 0
            && (Math.Min(reading.SmallestCount, reading.Count ?? long.MaxValue) < Minimum
                || PartsOf(reading.Measure).Any(part =>
                    Contains(window ?? reading.Window, reading.Slice, reading.Grouping, reading.CellIndex, part)
                    || (reading.ReferenceIndex >= 0 && Contains(window ?? reading.Window, reading.Slice, reading.Grouping, reading.ReferenceIndex, part))));
    }

    /// <summary>The parts of a cell that a measure rests on.</summary>
    private static WithheldPart[] PartsOf(string measure) => measure switch
    {
        MeasureNames.MeanScore or MeasureNames.MeanScoreGap or MeasureNames.StandardizedMeanDifference => [WithheldPart.Scores],
        MeasureNames.CalibrationGap => [WithheldPart.Scores, WithheldPart.Outcomes],
        MeasureNames.AdjustedOddsRatio or MeasureNames.AdjustedRateGap => [WithheldPart.Adjusted],
        MeasureNames.TruePositiveRate or MeasureNames.FalsePositiveRate or MeasureNames.Precision or MeasureNames.OutcomeRate
            or MeasureNames.TruePositiveRate + MeasureNames.GapSuffix or MeasureNames.FalsePositiveRate + MeasureNames.GapSuffix
            or MeasureNames.Precision + MeasureNames.GapSuffix or MeasureNames.OutcomeRate + MeasureNames.GapSuffix => [WithheldPart.Outcomes],
        _ => [WithheldPart.All],
    };
}
