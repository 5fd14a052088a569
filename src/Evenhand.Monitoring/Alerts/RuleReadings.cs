using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Measures;

namespace Evenhand.Monitoring.Alerts;

/// <summary>Which readings a declared rule judges.</summary>
internal static class RuleReadings
{
    /// <summary>The name of the window of every record.</summary>
    public const string All = "all";

    /// <summary>The readings of a rule, all slices together.</summary>
    /// <remarks>A rule on the modelled basis falls back to observed where the window has no modelled reading of its measure.</remarks>
    public static IReadOnlyList<Reading> Of(AlertRule rule, RuleContext context)
    {
        string window = WindowOf(rule, context.Charter);
        List<Reading> matching = [.. context.Readings.Where(r => r.Window == window && r.Slice is null && Matches(rule, r))];
        string wanted = rule.Basis ?? (context.Charter.Circuit is null ? BasisNames.Observed : BasisNames.Modelled);
        List<Reading> onBasis = [.. matching.Where(r => r.Basis == wanted)];
        if (onBasis.Count == 0 && rule.Basis is null)
        {
            onBasis = [.. matching.Where(r => r.Basis == BasisNames.Observed)];
        }

        return onBasis.Count > 0 || rule.Basis is not null ? onBasis : [.. matching.Where(r => r.Basis == BasisNames.Bounds)];
    }

    /// <summary>The window of a rule: its own, else the charter's first, else all.</summary>
    public static string WindowOf(AlertRule rule, Charter charter) =>
        rule.Window ?? (charter.Windows.Count > 0 ? charter.Windows[0].Text : All);

    private static bool Matches(AlertRule rule, Reading reading) =>
        reading.Measure == rule.Measure
        && reading.Grouping == rule.Grouping
        && reading.Field == rule.Field
        && (rule.Group is null || reading.Group == rule.Group)
        && (reading.Cell is not null || rule.Grouping is null);
}
