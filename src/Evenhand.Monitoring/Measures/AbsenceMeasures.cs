using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Measures;

/// <summary>How often each field is missing or unlisted, by group and in all.</summary>
/// <remarks>For slices, crossed groups are left out: the rows would outnumber all others.</remarks>
public sealed class AbsenceMeasures : IMeasureFamily
{
    /// <inheritdoc/>
    public void Measure(GroupingView view, ICollection<Reading> readings)
    {
        ArgumentNullException.ThrowIfNull(view);
        ArgumentNullException.ThrowIfNull(readings);
        if (view.Sums.Slice is not null && view.Shape.Groups.Count > 1)
        {
            return;
        }

        SumLayout layout = view.Sums.Layout;
        foreach ((string measure, int kind) in (ReadOnlySpan<(string, int)>)[(MeasureNames.MissingRate, 0), (MeasureNames.UnlistedRate, 1)])
        {
            for (int f = 0; f < layout.AbsenceFields.Count; f++)
            {
                if (view.Shape.Fields.Any(g => g.Name == layout.AbsenceFields[f]))
                {
                    continue;
                }

                foreach (GroupCell group in view.Groups.Concat(view.Set))
                {
                    long absent = view.Sums.Absent(view.Shape, group.Index, f, kind);
                    readings.Add(view.Rate(measure, group, absent, group.Counts.Decided, layout.AbsenceFields[f]));
                }
            }
        }
    }
}
