using Cronos;
using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads when snapshots are taken.</summary>
internal static class SnapshotReader
{
    private const string Mend = "write minute, hour, day of month, month and day of week, such as \"0 6 * * 1\" for Mondays at 06:00";

    private static readonly (string Name, string Range)[] Fields =
    [
        ("minute", "0 to 59"), ("hour", "0 to 23"), ("day of month", "1 to 31"), ("month", "1 to 12 or JAN to DEC"),
        ("day of week", "0 to 7 or SUN to SAT"),
    ];

    // Any instant serves to ask whether a schedule ever comes round; leap days come within the 8 years that follow it.
    private static readonly DateTime AnyInstant = new(2031, 1, 1, 0, 0, 0, DateTimeKind.Utc);

    /// <summary>The schedule, or null.</summary>
    public static string? Read(KeyedNode? node)
    {
        MapReader? map = node?.Map(CharterShapes.Snapshots, "write a mapping such as { schedule: \"0 6 * * 1\" }");
        KeyedNode? schedule = map?.Require("schedule", Mend);
        string? text = TextValue.Read(schedule, Mend);
        return text is not null && IsUsable(schedule!, text) ? text : null;
    }

    private static bool IsUsable(KeyedNode node, string text)
    {
        string[] parts = text.Split((char[]?)null, StringSplitOptions.RemoveEmptyEntries);
        if (parts.Length != Fields.Length)
        {
            node.Report(FormattableString.Invariant($"{QuotedText.Of(text)} has {parts.Length} of 5 fields"), Mend);
            return false;
        }

        if (CronExpression.TryParse(text, CronFormat.Standard, out CronExpression? schedule))
        {
            bool comes = schedule.GetNextOccurrence(AnyInstant) is not null;
            if (!comes)
            {
                node.Report($"{QuotedText.Of(text)} never comes round", "correct the day of month or the month");
            }

            return comes;
        }

        ReportBrokenField(node, text, parts);
        return false;
    }

    // Each field is tried alone, the others being stars, to find the one at fault.
    private static void ReportBrokenField(KeyedNode node, string text, string[] parts)
    {
        for (int i = 0; i < parts.Length; i++)
        {
            string[] alone = ["*", "*", "*", "*", "*"];
            alone[i] = parts[i];
            if (!CronExpression.TryParse(string.Join(' ', alone), CronFormat.Standard, out _))
            {
                node.Report($"{QuotedText.Of(parts[i])} is no {Fields[i].Name}", $"write {Fields[i].Range}, *, a range, a list or a step such as */2");
                return;
            }
        }

        node.Report($"{QuotedText.Of(text)} is no schedule", Mend);
    }
}
