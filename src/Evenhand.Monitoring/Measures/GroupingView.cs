using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Windows;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Monitoring.Measures;

/// <summary>One grouping in one window: what measures are computed from.</summary>
public sealed class GroupingView
{
    /// <summary>Looks at a grouping.</summary>
    public GroupingView(WindowSums sums, GroupingShape shape)
    {
        ArgumentNullException.ThrowIfNull(sums);
        ArgumentNullException.ThrowIfNull(shape);
        Sums = sums;
        Shape = shape;
        Charter = sums.Layout.Charter;
        Groups = [.. shape.ListedCells().Select(CellOf)];
        Set = shape.Groups.Count == 1 ? [Special(shape.Fields[0].UnlistedCode), Special(shape.Fields[0].DeclinedCode)] : [];
        IsReferenceNamed = shape.Groups.Count > 0 && shape.Groups.All(g => Charter.Groups[g].Reference is not null);
        Reference = shape.Groups.Count == 0 ? null : IsReferenceNamed ? NamedReference() : StatedReference() ?? HighestReference();
        long known = Groups.Sum(g => g.Counts.Decided);
        long decided = sums.Counts(sums.Layout.Groupings[0], 0).Decided;
        KnownShare = decided == 0 ? double.NaN : (double)known / decided;
    }

    /// <summary>The sums.</summary>
    public WindowSums Sums { get; }

    /// <summary>The grouping.</summary>
    public GroupingShape Shape { get; }

    /// <summary>The charter.</summary>
    public Charter Charter { get; }

    /// <summary>The groups whose labels are all listed, in charter order; one unnamed group for everyone.</summary>
    public IReadOnlyList<GroupCell> Groups { get; }

    /// <summary>The rows of unlisted and declined labels; none for crossed groups and everyone.</summary>
    public IReadOnlyList<GroupCell> Set { get; }

    /// <summary>The group compared with: the charter's, or the one with the highest rate; null where there is none.</summary>
    public GroupCell? Reference { get; }

    /// <summary>Whether the charter names the reference.</summary>
    public bool IsReferenceNamed { get; }

    /// <summary>Share of decided records whose labels are all listed; NaN where nothing was decided.</summary>
    public double KnownShare { get; }

    /// <summary>The charter's confidence level.</summary>
    public double Level => Charter.Level;

    /// <summary>A reading about a group, without a number yet.</summary>
    public Reading Row(string measure, GroupCell group, string basis = BasisNames.Observed, string? field = null) => new()
    {
        Window = Sums.Window,
        Slice = Sums.Slice,
        Measure = measure,
        Basis = basis,
        Grouping = Shape.Name,
        Group = Shape.Name is null ? null : group.Label,
        Cell = group.Cell,
        CellIndex = group.Index,
        Field = field,
    };

    /// <summary>A rate with its Wilson interval.</summary>
    public Reading Rate(string measure, GroupCell group, long numerator, long denominator, string? field = null)
    {
        Reading row = Row(measure, group, field: field);
        row.Count = row.SmallestCount = denominator;
        row.Method = "wilson";
        SetNumbers(row, (double)numerator / denominator, WilsonInterval.Of(numerator, denominator, Level));
        return row;
    }

    /// <summary>A reading that compares a group with the reference, without a number yet.</summary>
    public Reading Comparison(string measure, GroupCell group, string basis = BasisNames.Observed) => new()
    {
        Window = Sums.Window,
        Slice = Sums.Slice,
        Measure = measure,
        Basis = basis,
        Grouping = Shape.Name,
        Group = group.Label,
        Cell = group.Cell,
        CellIndex = group.Index,
        Reference = Reference!.Label,
        ReferenceIndex = Reference.Index,
    };

    /// <summary>A difference of rates with Newcombe's hybrid score interval.</summary>
    public Reading Gap(string measure, GroupCell group, long x, long n, long xReference, long nReference)
    {
        Reading row = Comparison(measure, group);
        row.Count = n;
        row.SmallestCount = Math.Min(n, nReference);
        row.Method = "newcombe";
        SetNumbers(row, ((double)x / n) - ((double)xReference / nReference), NewcombeDifference.Of(x, n, xReference, nReference, Level));
        return row;
    }

    /// <summary>The groups that are compared: all but the reference.</summary>
    public IEnumerable<GroupCell> Compared() => Reference is null ? [] : Groups.Where(g => g.Index != Reference.Index);

    /// <summary>Sets a number and its interval at the charter's level.</summary>
    public void SetNumbers(Reading row, double value, Interval interval)
    {
        ArgumentNullException.ThrowIfNull(row);
        row.Value = value;
        row.Low = interval.Low;
        row.High = interval.High;
        row.Level = Level;
        if (double.IsNaN(value) && row.Note is null)
        {
            row.AddNote("no records to measure");
        }
    }

    private GroupCell CellOf(int cell)
    {
        string[] labels = Shape.Labels(cell);
        return new GroupCell(
            cell,
            string.Join('+', labels),
            labels.Length == 0 ? null : [.. labels.Select((label, i) => KeyValuePair.Create(Shape.Fields[i].Name, label))],
            Sums.Counts(Shape, cell));
    }

    private GroupCell Special(int code)
    {
        int cell = Shape.CellOf([code]);
        return new GroupCell(cell, Shape.Label(cell), null, Sums.Counts(Shape, cell));
    }

    private GroupCell NamedReference()
    {
        int cell = Shape.CellOf([.. Shape.Groups.Select(g => Charter.Groups[g].Reference!.Value)]);
        return Groups.First(g => g.Index == cell);
    }

    private GroupCell? StatedReference() =>
        Sums.StatedReferences.TryGetValue(Shape.Name!, out int cell) ? Groups.First(g => g.Index == cell) : null;

    private GroupCell? HighestReference()
    {
        GroupCell[] enough = [.. Groups.Where(g => g.Counts.Decided >= Charter.MinimumCount)];
        IEnumerable<GroupCell> eligible = enough.Length > 0 ? enough : Groups.Where(g => g.Counts.Decided > 0);
        return eligible.MaxBy(g => (double)g.Counts.Favourable / g.Counts.Decided);
    }
}
