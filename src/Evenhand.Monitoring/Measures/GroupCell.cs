using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Measures;

/// <summary>One group of a grouping in one window.</summary>
/// <param name="Index">Its cell in the <see cref="GroupingShape"/>; −1 for a row of several cells.</param>
/// <param name="Label">Its label.</param>
/// <param name="Cell">Its label by group field; null where it has none.</param>
/// <param name="Counts">Its decisions.</param>
public sealed record GroupCell(int Index, string Label, IReadOnlyList<KeyValuePair<string, string>>? Cell, CellCounts Counts);
