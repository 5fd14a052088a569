using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Disclosure;

/// <summary>Decides which cells of a snapshot must not leave the store.</summary>
/// <remarks>
/// <para>A group of at least one and fewer than <c>minimum_cell</c> people is withheld, and with it as many others of its window as it
/// takes that it cannot be worked out from totals, margins of crossed groups and slices. A group of nobody is not shown either, but
/// nothing is withheld to hide that it is empty.</para>
/// <para>How many labels are missing or unlisted is about the data, not a group of people, and is always published. Windows that
/// overlap are planned apart: differences between them are not protected.</para>
/// </remarks>
public static class DisclosurePlanner
{
    // Beyond this, slices are planned one by one: the audit grows with the cube of what is withheld.
    private const int MostItemsTogether = 3000;

    /// <summary>Plans every window.</summary>
    public static WithheldCells Plan(SumLayout layout, IReadOnlyList<WindowSums> sums)
    {
        ArgumentNullException.ThrowIfNull(layout);
        ArgumentNullException.ThrowIfNull(sums);
        WithheldCells withheld = new(layout.Charter.MinimumCell);
        if (withheld.Minimum == 0)
        {
            return withheld;
        }

        int cells = layout.Groupings.Sum(g => g.Cells);
        foreach (IGrouping<string, WindowSums> window in sums.GroupBy(s => s.Window))
        {
            foreach (WindowSums[] together in cells * window.Count() <= MostItemsTogether ? [[.. window]] : window.Chunk(1))
            {
                new WindowPlan(layout, together, withheld.Minimum).AddTo(withheld);
            }
        }

        return withheld;
    }

    private sealed class WindowPlan
    {
        private readonly SuppressionTable _table = new();
        private readonly Dictionary<(int Slice, int Shape, int Cell), int> _items = [];
        private readonly SumLayout _layout;
        private readonly WindowSums[] _slices;
        private readonly int _minimum;

        public WindowPlan(SumLayout layout, WindowSums[] slices, int minimum)
        {
            _layout = layout;
            _slices = slices;
            _minimum = minimum;
            for (int s = 0; s < slices.Length; s++)
            {
                AddSlice(s);
            }

            AddSlicesUp();
        }

        public void AddTo(WithheldCells withheld)
        {
            HashSet<int> planned = [.. ComplementarySuppression.Plan(_table)];
            foreach (((int slice, int shape, int cell), int item) in _items)
            {
                if (planned.Contains(item) || IsEmptyGroup(slice, shape, cell))
                {
                    withheld.Add(_slices[slice].Window, _slices[slice].Slice, _layout.Groupings[shape].Name, cell);
                }
            }
        }

        private bool IsEmptyGroup(int slice, int shape, int cell) =>
            _layout.Groupings[shape].Name is not null
            && _layout.Groupings[shape].IsListed(cell)
            && _slices[slice].Counts(_layout.Groupings[shape], cell).Decided == 0;

        private void AddSlice(int slice)
        {
            for (int g = 0; g < _layout.Groupings.Count; g++)
            {
                GroupingShape shape = _layout.Groupings[g];
                for (int cell = 0; cell < shape.Cells; cell++)
                {
                    long count = _slices[slice].Counts(shape, cell).Decided;
                    CellExposure exposure = ExposureOf(shape, cell);
                    bool isSensitive = exposure == CellExposure.Published && count > 0 && count < _minimum;
                    _items[(slice, g, cell)] = _table.Add(count, exposure, isSensitive);
                }
            }

            for (int g = 1; g < _layout.Groupings.Count; g++)
            {
                AddMargins(slice, g);
            }
        }

        private static CellExposure ExposureOf(GroupingShape shape, int cell)
        {
            if (shape.Groups.Count == 0)
            {
                return CellExposure.Required;
            }

            if (shape.Groups.Count > 1)
            {
                return shape.IsListed(cell) ? CellExposure.Published : CellExposure.Hidden;
            }

            CodedField field = shape.Fields[0];
            return cell == field.MissingCode || cell == field.UnlistedCode ? CellExposure.Required : CellExposure.Published;
        }

        /// <summary>A single group adds up to everyone; a crossed one to each grouping over fewer of its groups.</summary>
        private void AddMargins(int slice, int g)
        {
            GroupingShape shape = _layout.Groupings[g];
            for (int m = 0; m < g; m++)
            {
                GroupingShape margin = _layout.Groupings[m];
                if (margin.Groups.Count >= shape.Groups.Count || margin.Groups.Any(i => !shape.Groups.Contains(i))
                    || (margin.Groups.Count == 0 && shape.Groups.Count > 1))
                {
                    continue;
                }

                int[] places = [.. margin.Groups.Select(i => shape.Groups.ToList().IndexOf(i))];
                foreach (IGrouping<int, int> same in Enumerable.Range(0, shape.Cells)
                    .GroupBy(cell => margin.CellOf([.. places.Select(p => shape.CodeOf(cell, p))])))
                {
                    _table.AddSum(_items[(slice, m, same.Key)], same.Select(cell => _items[(slice, g, cell)]));
                }
            }
        }

        /// <summary>The slices of one field add up to all slices together.</summary>
        private void AddSlicesUp()
        {
            foreach (IGrouping<string, int> field in Enumerable.Range(0, _slices.Length)
                .Where(s => _slices[s].Slice is not null)
                .GroupBy(s => _slices[s].Slice!.Split('=')[0]))
            {
                foreach (((int slice, int g, int cell), int item) in _items.Where(i => _slices[i.Key.Slice].Slice is null).ToList())
                {
                    _table.AddSum(item, field.Select(s => _items[(s, g, cell)]));
                }
            }
        }
    }
}
