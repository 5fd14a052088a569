using System.Globalization;
using System.Text.Json.Nodes;
using Spectre.Console;

namespace Evenhand.Daemon.Replay;

/// <summary>A snapshot as tables that a person can read.</summary>
internal static class SnapshotTable
{
    private const int Width = 140;

    private const string Caution =
        "A gap is a signal to investigate, not proof of unlawful discrimination; its absence is no clearance. Local law and licensed professionals decide.";

    private static readonly string[] AlertKeys = ["measure", "window", "grouping", "group", "field"];

    /// <summary>Writes the tables.</summary>
    public static void Write(JsonObject snapshot, TextWriter to)
    {
        IAnsiConsole console = AnsiConsole.Create(new AnsiConsoleSettings
        {
            Out = new AnsiConsoleOutput(to),
            Ansi = AnsiSupport.No,
            ColorSystem = ColorSystemSupport.NoColors,
            Interactive = InteractionSupport.No,
        });
        console.Profile.Width = Width;
        Head(snapshot, console);
        JsonArray readings = snapshot["readings"]!.AsArray();
        foreach ((string window, string title) in Windows(snapshot))
        {
            console.WriteLine();
            console.WriteLine(title);
            foreach (string grouping in Groupings(readings, window))
            {
                console.Write(GroupTable(readings, window, grouping));
            }
        }

        Absences(readings, console);
        Alerts(snapshot, console);
        console.WriteLine();
        console.WriteLine(Caution);
    }

    private static void Head(JsonObject snapshot, IAnsiConsole console)
    {
        JsonObject records = snapshot["records"]!.AsObject();
        string parts = string.Join(", ", records.Where(r => r.Key is not ("read" or "rejected_by_reason") && Count(r.Value) != 0)
            .Select(r => $"{Count(r.Value):N0} {r.Key.Replace('_', ' ')}"));
        console.WriteLine($"{snapshot["charter"]!["id"]} as of {snapshot["as_of"]}: {Count(records["read"]):N0} records read{(parts.Length > 0 ? $" ({parts})" : "")}");
        if (snapshot["outcomes"] is JsonObject outcomes)
        {
            console.WriteLine("outcomes: " + string.Join(", ", outcomes.Select(o => $"{Count(o.Value):N0} {o.Key}")));
        }
    }

    /// <summary>The windows that have records; those that cover the very same records as another are named together.</summary>
    private static IEnumerable<(string Window, string Title)> Windows(JsonObject snapshot)
    {
        foreach (IGrouping<long, JsonNode?> same in snapshot["coverage"]!.AsArray().GroupBy(c => Count(c!["records"])))
        {
            JsonNode last = same.Last()!;
            string names = string.Join(", ", same.Select(c => (string)c!["window"]!));
            string extent = $"{last["from"]} to {last["to"]}";
            if (same.Key > 0)
            {
                yield return ((string)last["window"]!, $"Window {names}: {same.Key:N0} records, {extent}");
            }
        }
    }

    private static IEnumerable<string> Groupings(JsonArray readings, string window) => readings
        .Where(r => (string?)r!["window"] == window && r["grouping"] is not null)
        .Select(r => (string)r!["grouping"]!)
        .Distinct();

    private static Table GroupTable(JsonArray readings, string window, string grouping)
    {
        List<JsonNode> rows = [.. readings.Where(r => (string?)r!["window"] == window && (string?)r["grouping"] == grouping && r["slice"] is null).Select(r => r!)];
        string? reference = (string?)rows.FirstOrDefault(r => r["reference"] is not null)?["reference"];
        Table table = new Table().Border(TableBorder.Simple).AddColumns(grouping, "decided", "favourable", "rate", $"gap to {Markup.Escape(reference ?? "–")}", "whatever is missing", "ratio", "state");
        foreach (int column in (ReadOnlySpan<int>)[1, 2])
        {
            table.Columns[column].Alignment = Justify.Right;
        }

        foreach (JsonNode rate in rows.Where(r => (string?)r["measure"] == "selection_rate" && (string?)r["basis"] == "observed"))
        {
            string group = (string)rate["group"]!;
            JsonNode? Find(string measure, string basis) =>
                rows.FirstOrDefault(r => (string?)r["measure"] == measure && (string?)r["basis"] == basis && (string?)r["group"] == group);
            JsonNode? gap = Find("selection_rate_gap", "observed"), bounds = Find("selection_rate_gap", "bounds"), ratio = Find("impact_ratio", "observed");
            string[] states = [.. rows.Where(r => (string?)r["group"] == group && r["state"] is not null).Select(r => State((string)r["state"]!)).Distinct()];
            table.AddRow(
                Markup.Escape(group),
                rate["suppressed"] is null ? $"{Count(rate["count"]):N0}" : "withheld",
                rate["suppressed"] is null ? $"{Count(rate["favourable"]):N0}" : "",
                Cell(rate, Percent),
                gap is null ? group == reference ? "reference" : "" : Cell(gap, Points),
                bounds is null ? "" : Cell(bounds, Points),
                ratio is null ? "" : Cell(ratio, v => v.ToString("0.000", CultureInfo.InvariantCulture)),
                string.Join(", ", states));
        }

        return table;
    }

    private static void Absences(JsonArray readings, IAnsiConsole console)
    {
        string? window = (string?)readings.LastOrDefault()?["window"];
        List<JsonNode> rows = [.. readings.Where(r => (string?)r!["window"] == window && r["grouping"] is null && r["slice"] is null && r["field"] is not null && Number(r["value"]) > 0).Select(r => r!)];
        if (rows.Count == 0)
        {
            return;
        }

        Table table = new Table().Border(TableBorder.Simple).AddColumns("field", "", "share of records");
        foreach (JsonNode row in rows)
        {
            table.AddRow(Markup.Escape((string)row["field"]!), (string?)row["measure"] == "missing_rate" ? "missing" : "unlisted", Cell(row, Percent));
        }

        console.WriteLine();
        console.WriteLine("Missing and unlisted");
        console.Write(table);
    }

    private static void Alerts(JsonObject snapshot, IAnsiConsole console)
    {
        JsonArray alerts = snapshot["alerts"]!.AsArray();
        console.WriteLine();
        console.WriteLine(alerts.Count == 0 ? "No alert is open." : $"{alerts.Count} open {(alerts.Count == 1 ? "alert" : "alerts")}:");
        foreach (JsonNode? alert in alerts)
        {
            string what = string.Join(' ', AlertKeys.Select(k => (string?)alert![k]).Where(t => t is not null));
            string limit = alert!["below"] is { } below ? $", limit {below}" : alert["above"] is { } above ? $", limit {above}" : "";
            string value = alert["value"] is { } v ? $": {Number(v):0.####}{Ends(alert)}{limit}" : "";
            string note = alert["note"] is { } text ? $" ({text})" : "";
            console.WriteLine($"  {alert["severity"]} {alert["alert"]}{(what.Length > 0 ? $": {what}" : "")}{value}{note}");
        }
    }

    private static string Ends(JsonNode alert) =>
        alert["low"] is { } low && alert["high"] is { } high ? string.Create(CultureInfo.InvariantCulture, $" ({Number(low):0.####} to {Number(high):0.####})") : "";

    private static string Cell(JsonNode reading, Func<double, string> format)
    {
        if (reading["suppressed"] is not null)
        {
            return "";
        }

        string value = reading["value"] is { } v ? format(Number(v)) : reading.AsObject().ContainsKey("value") ? "–" : "";
        string low = reading["low"] is { } l ? format(Number(l)) : "–";
        string high = reading["high"] is { } h ? format(Number(h)) : "–";
        return value.Length == 0 ? $"{low} to {high}" : $"{value} ({low} to {high})";
    }

    private static string State(string state) => state switch
    {
        "within" => "within limit",
        "beyond" => "beyond limit",
        "too_few" => "too few to judge",
        "warming_up" => "warming up",
        _ => state,
    };

    private static string Percent(double share) => string.Create(CultureInfo.InvariantCulture, $"{share * 100:0.0} %");

    private static string Points(double gap) => string.Create(CultureInfo.InvariantCulture, $"{gap * 100:+0.0;-0.0;0.0}");

    private static double Number(JsonNode? node) => node is null ? double.NaN : double.Parse(node.ToString(), CultureInfo.InvariantCulture);

    private static long Count(JsonNode? node) => node is null ? 0 : long.Parse(node.ToString(), CultureInfo.InvariantCulture);
}
