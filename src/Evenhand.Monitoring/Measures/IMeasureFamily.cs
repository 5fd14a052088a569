namespace Evenhand.Monitoring.Measures;

/// <summary>Measures that are computed together from one grouping in one window.</summary>
/// <remarks>To add a measure, add it to a family or add a family to <see cref="MeasureEngine"/>.</remarks>
public interface IMeasureFamily
{
    /// <summary>Adds the family's readings of a grouping.</summary>
    /// <param name="view">The grouping; without groups for everyone.</param>
    /// <param name="readings">Where readings go, in charter order.</param>
    void Measure(GroupingView view, ICollection<Reading> readings);
}
