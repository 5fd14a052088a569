using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Disclosure;

/// <summary>Decides which cells of a snapshot must not leave the store.</summary>
public static class DisclosurePlanner
{
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

        foreach (WindowSums window in sums)
        {
            foreach (GroupingShape shape in layout.Groupings)
            {
                for (int cell = 0; cell < shape.Cells; cell++)
                {
                    if (shape.IsListed(cell) && window.Counts(shape, cell).Decided < withheld.Minimum)
                    {
                        withheld.Add(window.Window, window.Slice, shape.Name, cell);
                    }
                }
            }
        }

        return withheld;
    }
}
