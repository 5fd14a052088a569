using System.Text.Json.Nodes;
using Evenhand.Monitoring.Measures;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>A reading as the flat JSON object that snapshots carry.</summary>
public static class ReadingJson
{
    /// <summary>The reading's object; keys that do not apply are absent, undefined and unbounded numbers are null.</summary>
    public static JsonObject Of(Reading reading)
    {
        ArgumentNullException.ThrowIfNull(reading);
        JsonObject row = new()
        {
            ["window"] = reading.Window,
            ["measure"] = reading.Measure,
            ["basis"] = reading.Basis,
        };
        Text(row, "slice", reading.Slice);
        Text(row, "grouping", reading.Grouping);
        Text(row, "group", reading.Group);
        if (reading.Cell is not null)
        {
            row["cell"] = new JsonObject(reading.Cell.Select(c => KeyValuePair.Create(c.Key, (JsonNode?)c.Value)));
        }

        Text(row, "reference", reading.Reference);
        Text(row, "field", reading.Field);
        Number(row, "value", reading.Value);
        Number(row, "low", reading.Low);
        Number(row, "high", reading.High);
        Number(row, "judged_low", reading.JudgedLow);
        Number(row, "judged_high", reading.JudgedHigh);
        Number(row, "level", reading.Level);
        Integer(row, "count", reading.Count);
        Integer(row, "favourable", reading.Favourable);
        Number(row, "known_share", reading.KnownShare);
        Number(row, "p_value", reading.PValue);
        Number(row, "homogeneity_p", reading.HomogeneityP);
        Text(row, "method", reading.Method);
        Text(row, "state", reading.State);
        Text(row, "note", NoteOf(reading));
        if (reading.Suppressed)
        {
            row["suppressed"] = true;
        }

        return row;
    }

    private static string? NoteOf(Reading reading)
    {
        bool isOpen = !IsFinite(reading.Value) || !IsFinite(reading.Low) || !IsFinite(reading.High);
        return reading.Note ?? (isOpen ? "too few records for an interval" : null);
    }

    private static bool IsFinite(double? number) => number is null || double.IsFinite(number.Value);

    private static void Text(JsonObject row, string key, string? value)
    {
        if (value is not null)
        {
            row[key] = value;
        }
    }

    private static void Number(JsonObject row, string key, double? value)
    {
        if (value is not null)
        {
            row[key] = double.IsFinite(value.Value) ? value.Value : null;
        }
    }

    private static void Integer(JsonObject row, string key, long? value)
    {
        if (value is not null)
        {
            row[key] = CanonicalJson.Integer(value.Value);
        }
    }
}
