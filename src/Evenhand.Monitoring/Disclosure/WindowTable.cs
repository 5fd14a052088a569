using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Disclosure;

/// <summary>One kind of count of some slices of a window (decisions, known outcomes, scores), cell by cell, with all the sums that it obeys.</summary>
/// <remarks>Counts are numbered slice by slice, grouping by grouping, cell by cell; after a slice's cells come its groupings' listed totals.</remarks>
internal sealed class WindowTable
{
    private readonly SumLayout _layout;
    private readonly IReadOnlyList<WindowSums> _slices;
    private readonly int[] _firstOf;
    private readonly int _itemsOfSlice;

    /// <summary>Makes the table.</summary>
    /// <param name="layout">What stands where.</param>
    /// <param name="slices">The window's sums: all slices together, single ones, or both.</param>
    /// <param name="rule">What is counted, and what of it may be published.</param>
    public WindowTable(SumLayout layout, IReadOnlyList<WindowSums> slices, CountRule rule)
    {
        _layout = layout;
        _slices = slices;
        _firstOf = new int[layout.Groupings.Count];
        for (int g = 0; g < _firstOf.Length; g++)
        {
            _firstOf[g] = _itemsOfSlice;
            _itemsOfSlice += layout.Groupings[g].Cells;
        }

        _itemsOfSlice += _firstOf.Length;
        for (int s = 0; s < slices.Count; s++)
        {
            AddSlice(s, rule);
            AddMargins(s);
        }

        AddSlicesUp();
    }

    /// <summary>The counts and their sums.</summary>
    public SuppressionTable Table { get; } = new();

    /// <summary>The number of a cell's count.</summary>
    public int Item(int slice, int grouping, int cell) => (slice * _itemsOfSlice) + _firstOf[grouping] + cell;

    /// <summary>The number of the count of records whose labels of a grouping are all listed; hidden in the table.</summary>
    public int ListedTotal(int slice, int grouping) => ((slice + 1) * _itemsOfSlice) - _firstOf.Length + grouping;

    private void AddSlice(int slice, CountRule rule)
    {
        WindowSums sums = _slices[slice];
        foreach (GroupingShape shape in _layout.Groupings)
        {
            for (int cell = 0; cell < shape.Cells; cell++)
            {
                CellExposure exposure = rule.ExposureOf(shape, cell);
                Table.Add(rule.CountOf(sums, shape, cell), exposure, exposure == CellExposure.Published && rule.IsSensitive(sums, shape, cell));
            }
        }

        foreach (GroupingShape shape in _layout.Groupings)
        {
            Table.Add(shape.ListedCells().Sum(cell => rule.CountOf(sums, shape, cell)), CellExposure.Hidden, false);
        }
    }

    private void AddMargins(int slice)
    {
        for (int g = 0; g < _layout.Groupings.Count; g++)
        {
            GroupingShape shape = _layout.Groupings[g];
            int grouping = g;
            Table.AddSum(ListedTotal(slice, g), shape.ListedCells().Select(cell => Item(slice, grouping, cell)));
            for (int m = 0; m < _layout.Groupings.Count; m++)
            {
                if (IsMargin(_layout.Groupings[m], shape))
                {
                    AddMargin(slice, g, m);
                }
            }
        }
    }

    /// <summary>Everyone is a margin of single groups, and a grouping of those that cross it with more.</summary>
    private static bool IsMargin(GroupingShape margin, GroupingShape shape) =>
        margin.Groups.Count < shape.Groups.Count
        && margin.Groups.All(i => shape.Groups.Contains(i))
        && (margin.Groups.Count > 0 || shape.Groups.Count == 1);

    private void AddMargin(int slice, int g, int m)
    {
        GroupingShape shape = _layout.Groupings[g], margin = _layout.Groupings[m];
        int[] places = [.. margin.Groups.Select(i => shape.Groups.ToList().IndexOf(i))];
        foreach (IGrouping<int, int> same in Enumerable.Range(0, shape.Cells)
            .GroupBy(cell => margin.CellOf([.. places.Select(p => shape.CodeOf(cell, p))])))
        {
            Table.AddSum(Item(slice, m, same.Key), same.Select(cell => Item(slice, g, cell)));
        }
    }

    /// <summary>The slices of one field add up to all slices together.</summary>
    private void AddSlicesUp()
    {
        int whole = _slices.ToList().FindIndex(s => s.Slice is null);
        if (whole < 0)
        {
            return;
        }

        foreach (IGrouping<string, int> field in Enumerable.Range(0, _slices.Count).Where(s => s != whole).GroupBy(s => _slices[s].Slice!.Split('=')[0]))
        {
            for (int item = 0; item < _itemsOfSlice; item++)
            {
                int at = item;
                Table.AddSum((whole * _itemsOfSlice) + at, field.Select(s => (s * _itemsOfSlice) + at));
            }
        }
    }
}
