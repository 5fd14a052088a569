using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Disclosure;

/// <summary>One kind of count that is protected: what it counts, and when it stands for too few people.</summary>
internal abstract class CountRule(int minimum)
{
    /// <summary>Records below which a count is too small.</summary>
    protected int Minimum { get; } = minimum;

    /// <summary>The count of a cell.</summary>
    public abstract long CountOf(WindowSums sums, GroupingShape shape, int cell);

    /// <summary>Whether nobody may be able to work the count of a cell out.</summary>
    public virtual bool IsSensitive(WindowSums sums, GroupingShape shape, int cell) => IsTooSmall(CountOf(sums, shape, cell));

    /// <summary>Whether the count of a cell is published.</summary>
    public virtual CellExposure ExposureOf(GroupingShape shape, int cell) => CellExposure.Published;

    /// <summary>Whether a count is above nothing and below the minimum.</summary>
    protected bool IsTooSmall(long count) => count > 0 && count < Minimum;
}

/// <summary>The decided records of a cell: the size of a group.</summary>
/// <remarks>
/// Everyone and cells with a missing or unlisted label count as known to the reader: how often a label is missing is about the data and
/// is published, by group, as the missing and unlisted rates of the group fields.
/// </remarks>
internal sealed class DecidedCount(int minimum) : CountRule(minimum)
{
    /// <inheritdoc/>
    public override long CountOf(WindowSums sums, GroupingShape shape, int cell) => sums.Counts(shape, cell).Decided;

    /// <inheritdoc/>
    public override CellExposure ExposureOf(GroupingShape shape, int cell)
    {
        bool isKnown = shape.Groups.Count == 0;
        for (int i = 0; i < shape.Fields.Count; i++)
        {
            CodedField field = shape.Fields[i];
            int code = shape.CodeOf(cell, i);
            isKnown |= code == field.MissingCode || code == field.UnlistedCode;
        }

        return isKnown ? CellExposure.Required : CellExposure.Published;
    }
}

/// <summary>The records of a cell whose outcome is known.</summary>
internal sealed class OutcomeCount(int minimum) : CountRule(minimum)
{
    /// <inheritdoc/>
    public override long CountOf(WindowSums sums, GroupingShape shape, int cell)
    {
        CellCounts counts = sums.Counts(shape, cell);
        return counts.Positive + counts.Negative;
    }
}

/// <summary>The records of a cell that carry a score.</summary>
internal sealed class ScoredCount(int minimum) : CountRule(minimum)
{
    /// <inheritdoc/>
    public override long CountOf(WindowSums sums, GroupingShape shape, int cell) =>
        Enum.GetValues<OutcomeCode>().Sum(o => sums.Scores(shape, cell, o).Count);
}

/// <summary>The records of a cell that stand in any stratum; too small as soon as one stratum is.</summary>
/// <remarks>Strata of everyone are not kept, so nobody knows them.</remarks>
internal sealed class StratumCount(int minimum) : CountRule(minimum)
{
    /// <inheritdoc/>
    public override long CountOf(WindowSums sums, GroupingShape shape, int cell) =>
        shape.StrataAt < 0 ? 0 : Enumerable.Range(0, sums.Layout.Strata).Sum(s => InStratum(sums, shape, cell, s));

    /// <inheritdoc/>
    public override bool IsSensitive(WindowSums sums, GroupingShape shape, int cell) =>
        shape.StrataAt >= 0 && Enumerable.Range(0, sums.Layout.Strata).Any(s => IsTooSmall(InStratum(sums, shape, cell, s)));

    /// <inheritdoc/>
    public override CellExposure ExposureOf(GroupingShape shape, int cell) =>
        shape.StrataAt < 0 ? CellExposure.Hidden : CellExposure.Published;

    private static long InStratum(WindowSums sums, GroupingShape shape, int cell, int stratum) =>
        sums.InStratum(shape, cell, stratum, 0) + sums.InStratum(shape, cell, stratum, 1);
}
