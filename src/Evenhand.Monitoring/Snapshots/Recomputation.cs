using System.Globalization;
using System.Text.Json;
using System.Text.Json.Nodes;
using Evenhand.Monitoring.Alerts;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Measures;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>Derives the readings of a snapshot again from the sums that it carries.</summary>
public static class Recomputation
{
    /// <summary>Numbers that differ by no more than this, relative to the larger, are the same.</summary>
    public const double Tolerance = 1e-9;

    // What tells the readings of a snapshot apart, in the order of KeyOf(Reading).
    private static readonly string[] KeyNames = ["window", "slice", "measure", "basis", "grouping", "group", "field"];

    /// <summary>What a reading's note says when the written state cannot give it again.</summary>
    internal const string RestsOnWithheld = "rests on withheld sums: cannot be derived from the state";

    /// <summary>Derives every reading again and compares.</summary>
    /// <param name="document">The parsed snapshot, with its state.</param>
    /// <param name="charter">The charter that the snapshot carries, parsed.</param>
    /// <exception cref="FormatException">No state, or not one of this charter.</exception>
    public static RecomputeReport Compare(JsonObject document, Charter charter)
    {
        ArgumentNullException.ThrowIfNull(document);
        if (document["state"] is not JsonObject state)
        {
            throw new FormatException("the snapshot carries no state to derive its readings from");
        }

        Dictionary<string, JsonObject> derived = Derive(new SumLayout(charter), state, _ => true).ToDictionary(KeyOf, ReadingJson.Of);
        List<string> differences = [];
        int compared = 0, skipped = 0;
        foreach (JsonObject stated in document["readings"]!.AsArray().Select(r => r!.AsObject()))
        {
            string key = KeyOf(stated);
            if (((string?)stated["note"])?.EndsWith(RestsOnWithheld, StringComparison.Ordinal) == true)
            {
                skipped++;
                derived.Remove(key);
                continue;
            }

            compared++;
            if (!derived.Remove(key, out JsonObject? again))
            {
                differences.Add($"{key}: stated, but the state does not give it");
            }
            else if (Difference(stated, again) is { } difference)
            {
                differences.Add($"{key}: {difference}");
            }
        }

        differences.AddRange(derived.Keys.Select(key => $"{key}: the state gives it, but it is not stated"));
        return new RecomputeReport(compared, skipped, differences);
    }

    /// <summary>Notes the readings that the written state does not give again; only windows of which something was left out can hold any.</summary>
    internal static void NoteWhatRestsOnWithheld(SumLayout layout, JsonObject state, IReadOnlySet<string> incomplete, IReadOnlyList<Reading> readings)
    {
        bool isIncomplete(string window) => incomplete.Contains(window) || incomplete.Contains(SnapshotBuilder.BaselineName(window));
        Dictionary<string, JsonObject> derived = Derive(layout, state, isIncomplete).ToDictionary(KeyOf, ReadingJson.Of);
        foreach (Reading reading in readings.Where(r => isIncomplete(r.Window)))
        {
            if (!derived.TryGetValue(KeyOf(reading), out JsonObject? again) || Difference(ReadingJson.Of(reading), again) is not null)
            {
                reading.AddNote(RestsOnWithheld);
            }
        }
    }

    private static List<Reading> Derive(SumLayout layout, JsonObject state, Func<string, bool> isWanted)
    {
        StateReader reader = new(layout);
        IReadOnlyList<WindowSums> all = reader.Read(state);
        string prefix = SnapshotBuilder.BaselineName("");
        List<WindowSums> windows = [.. all.Where(w => !w.Window.StartsWith(prefix, StringComparison.Ordinal) && isWanted(w.Window))];
        List<Reading> readings = [.. windows.SelectMany(MeasureEngine.Measure)];
        RuleBook.Judge(new RuleContext
        {
            Charter = layout.Charter,
            AsOf = 0,
            Newest = null,
            Counts = new ShardCounts(),
            Readings = readings,
            Windows = [],
            Slices = [],
            BaselineOf = window => all.FirstOrDefault(w => w.Window == SnapshotBuilder.BaselineName(window)),
        });
        reader.Withheld.Apply(readings);
        return readings;
    }

    private static string KeyOf(Reading r) => string.Join(' ', r.Window, r.Slice ?? "", r.Measure, r.Basis, r.Grouping ?? "", r.Group ?? "", r.Field ?? "");

    private static string KeyOf(JsonObject r) => string.Join(' ', KeyNames.Select(k => (string?)r[k] ?? ""));

    private static string? Difference(JsonObject stated, JsonObject again)
    {
        foreach (string key in stated.Select(p => p.Key).Union(again.Select(p => p.Key)))
        {
            if (!stated.ContainsKey(key) || !again.ContainsKey(key) || !IsSame(stated[key], again[key]))
            {
                return string.Create(CultureInfo.InvariantCulture, $"{key} is stated as {Text(stated, key)}, derived as {Text(again, key)}");
            }
        }

        return null;
    }

    private static string Text(JsonObject row, string key) => row.ContainsKey(key) ? row[key]?.ToJsonString() ?? "null" : "absent";

    private static bool IsSame(JsonNode? a, JsonNode? b)
    {
        if (a?.GetValueKind() == JsonValueKind.Number && b?.GetValueKind() == JsonValueKind.Number)
        {
            double x = NumberOf(a), y = NumberOf(b);
            return Math.Abs(x - y) <= Tolerance * Math.Max(Math.Abs(x), Math.Abs(y));
        }

        return JsonNode.DeepEquals(a, b);
    }

    private static double NumberOf(JsonNode node) => double.Parse(node.ToJsonString(), CultureInfo.InvariantCulture);
}
