using System.Globalization;
using System.Text.Json.Nodes;
using Evenhand.Daemon.Hosting;
using Spectre.Console;

namespace Evenhand.Daemon.Replay;

/// <summary>A snapshot as tables that a person can read.</summary>
internal static class SnapshotTable
{
    private const int Width = 160;

    private const string Caution =
        "A gap is a signal to investigate, not proof of unlawful discrimination; its absence is no clearance. Local law and licensed professionals decide.";

    private static readonly string[] Shown = ["selection_rate", "selection_rate_gap", "impact_ratio", "missing_rate", "unlisted_rate"];

    private static readonly string[] AlertKeys = ["measure", "window", "grouping", "group", "field"];

    /// <summary>Writes the tables.</summary>
    public static void Write(JsonObject snapshot, TextWriter to)
    {
        IAnsiConsole console = AnsiConsole.Create(new AnsiConsoleSettings
        {
            Out = new AnsiConsoleOutput(new PrintableWriter(to)),
            Ansi = AnsiSupport.No,
            ColorSystem = ColorSystemSupport.NoColors,
            Interactive = InteractionSupport.No,
        });
        console.Profile.Width = Width;
        Head(snapshot, console);
        JsonNode[] readings = [.. snapshot["readings"]!.AsArray().Where(r => r!["slice"] is null).Select(r => r!)];
        ILookup<string, JsonNode> byWindow = readings.ToLookup(r => (string)r["window"]!);
        foreach ((string window, string title) in Windows(snapshot))
        {
            console.WriteLine();
            console.WriteLine(title);
            foreach (IGrouping<string, JsonNode> grouping in byWindow[window].Where(r => r["grouping"] is not null).GroupBy(r => (string)r["grouping"]!))
            {
                console.Write(GroupTable([.. grouping], grouping.Key));
            }
        }

        Absences(readings, console);
        FurtherMeasures(snapshot, readings, console);
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
                yield return ((string)same.First()!["window"]!, $"Window {names}: {same.Key:N0} records, {extent}");
            }
        }
    }

    private static Table GroupTable(List<JsonNode> rows, string grouping)
    {
        ILookup<string?, JsonNode> byGroup = rows.ToLookup(r => (string?)r["group"]);
        string? reference = (string?)rows.FirstOrDefault(r => r["reference"] is not null)?["reference"];
        bool areLabelsMissing = rows.Exists(r => (string?)r["basis"] == "bounds" && Number(r["low"]) < Number(r["high"]));
        Table table = new Table().Border(TableBorder.Simple).AddColumns(Markup.Escape(grouping), "decided", "favourable", "rate, %");
        table.AddColumn(Markup.Escape(reference is null ? "gap, points" : $"gap to {reference}, points"));
        if (areLabelsMissing)
        {
            table.AddColumn("whatever the missing labels");
        }

        table.AddColumns("ratio", "state");
        table.Columns[1].Alignment = table.Columns[2].Alignment = Justify.Right;
        foreach (JsonNode rate in rows.Where(r => (string?)r["measure"] == "selection_rate" && (string?)r["basis"] == "observed" && !IsEmptySet(r)))
        {
            table.AddRow([.. GroupRow(byGroup[(string?)rate["group"]], rate, reference, areLabelsMissing)]);
        }

        return table;
    }

    /// <summary>A row of unlisted or declined labels that has nothing to show.</summary>
    private static bool IsEmptySet(JsonNode rate) =>
        rate["cell"] is null && (rate["suppressed"] is not null || Count(rate["count"]) == 0);

    private static IEnumerable<string> GroupRow(IEnumerable<JsonNode> rows, JsonNode rate, string? reference, bool areLabelsMissing)
    {
        string group = (string)rate["group"]!;
        JsonNode? Find(string measure, string basis) =>
            rows.FirstOrDefault(r => (string?)r["measure"] == measure && (string?)r["basis"] == basis);
        bool isWithheld = rate["suppressed"] is not null;
        yield return Markup.Escape(group);
        yield return isWithheld ? "withheld" : string.Create(CultureInfo.InvariantCulture, $"{Count(rate["count"]):N0}");
        yield return isWithheld ? "" : string.Create(CultureInfo.InvariantCulture, $"{Count(rate["favourable"]):N0}");
        yield return Cell(rate, Percent);
        yield return Find("selection_rate_gap", "observed") is { } gap ? Cell(gap, Points) : group == reference ? "reference" : "";
        if (areLabelsMissing)
        {
            yield return Find("selection_rate_gap", "bounds") is { } bounds ? Cell(bounds, Points) : "";
        }

        yield return Find("impact_ratio", "observed") is { } ratio ? Cell(ratio, v => v.ToString("0.000", CultureInfo.InvariantCulture)) : "";
        yield return string.Join(", ", rows.Where(r => r["state"] is not null).Select(r => State((string)r["state"]!)).Distinct());
    }

    private static void Absences(JsonNode[] readings, IAnsiConsole console)
    {
        string? window = (string?)readings.LastOrDefault()?["window"];
        List<JsonNode> rows = [.. readings.Where(r => (string?)r["window"] == window && r["grouping"] is null && r["field"] is not null && Number(r["value"]) > 0)];
        if (rows.Count == 0)
        {
            return;
        }

        Table table = new Table().Border(TableBorder.Simple).AddColumns("field", "", "share of records, %");
        foreach (JsonNode row in rows)
        {
            table.AddRow(Markup.Escape((string)row["field"]!), (string?)row["measure"] == "missing_rate" ? "missing" : "unlisted", Cell(row, Percent));
        }

        console.WriteLine();
        console.WriteLine("Missing and unlisted");
        console.Write(table);
    }

    /// <summary>Names what is measured but not in the tables, so that nobody takes it for missing.</summary>
    private static void FurtherMeasures(JsonObject snapshot, JsonNode[] readings, IAnsiConsole console)
    {
        string[] measures = [.. readings.Select(r => (string)r["measure"]!).Distinct().Where(m => !Shown.Contains(m))];
        bool hasSlices = snapshot["readings"]!.AsArray().Any(r => r!["slice"] is not null);
        if (measures.Length > 0)
        {
            console.WriteLine();
            console.WriteLine($"Also measured, in the snapshot (--out, --json): {string.Join(", ", measures)}{(hasSlices ? "; everything by slice as well" : "")}.");
        }
    }

    private static void Alerts(JsonObject snapshot, IAnsiConsole console)
    {
        JsonArray alerts = snapshot["alerts"]!.AsArray();
        console.WriteLine();
        console.WriteLine(alerts.Count == 0 ? "No alert is open." : $"{alerts.Count} open {(alerts.Count == 1 ? "alert" : "alerts")}:");
        foreach (JsonNode? alert in alerts)
        {
            // One line an alert: what is judged, the number with its ends, the limit, and what a person should know.
            string what = string.Join(' ', AlertKeys.Select(k => (string?)alert![k]).Where(t => t is not null));
            string limit = Limit(alert!) is { } l ? $", limit {l}" : "";
            string changed = (string?)alert!["kind"] == "shift" ? "changed by " : "";
            string value = alert["value"] is { } v ? $": {changed}{Number(v):0.####}{Ends(alert)}{(changed.Length > 0 ? " against the baseline" : "")}{limit}" : "";
            string note = alert["note"] is { } text ? $" ({text})" : "";
            console.WriteLine($"  {alert["severity"]} {alert["alert"]}{(what.Length > 0 ? $": {what}" : "")}{value}{note}");
        }
    }

    /// <summary>The limit that was passed: an alert may have one on either side.</summary>
    private static JsonNode? Limit(JsonNode alert) =>
        alert["below"] is { } below && !(Number(alert["value"]) > Number(below)) ? below : alert["above"] ?? alert["below"];

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

    private static string Percent(double share) => string.Create(CultureInfo.InvariantCulture, $"{share * 100:0.0}");

    private static string Points(double gap) => string.Create(CultureInfo.InvariantCulture, $"{gap * 100:+0.0;-0.0;0.0}");

    private static double Number(JsonNode? node) => node is null ? double.NaN : double.Parse(node.ToString(), CultureInfo.InvariantCulture);

    private static long Count(JsonNode? node) => node is null ? 0 : long.Parse(node.ToString(), CultureInfo.InvariantCulture);
}
