using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Measures;

/// <summary>Turns the sums of a window into readings, in one fixed order.</summary>
public static class MeasureEngine
{
    private static readonly IMeasureFamily[] Families =
    [
        new SelectionMeasures(),
        new BoundMeasures(),
        new AdjustedMeasures(),
        new OutcomeMeasures(),
        new ScoreMeasures(),
        new AbsenceMeasures(),
    ];

    /// <summary>Every reading of a window: everyone first, then grouping by grouping in charter order.</summary>
    /// <param name="sums">The window's sums.</param>
    public static IReadOnlyList<Reading> Measure(WindowSums sums)
    {
        ArgumentNullException.ThrowIfNull(sums);
        List<Reading> readings = [];
        foreach (GroupingShape shape in sums.Layout.Groupings)
        {
            GroupingView view = new(sums, shape);
            foreach (IMeasureFamily family in Families)
            {
                family.Measure(view, readings);
            }
        }

        return readings;
    }
}
