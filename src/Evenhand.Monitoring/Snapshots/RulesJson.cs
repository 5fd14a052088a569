using System.Text.Json.Nodes;
using Evenhand.Monitoring.Alerts;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Disclosure;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>Judgements and open alerts as a snapshot carries them.</summary>
internal static class RulesJson
{
    /// <summary>Every judgement; the numbers of one that rests on too few people are left out, its verdict is not.</summary>
    public static JsonArray Write(IReadOnlyList<Judgement> judgements, WithheldCells withheld) =>
        [.. judgements.Select(j => (JsonNode)Of(j, withheld))];

    /// <summary>The judgements that are beyond their limit, as open alerts.</summary>
    public static JsonArray WriteOpen(Charter charter, TickResult tick, WithheldCells withheld) =>
        [.. tick.Judgements.Where(j => j.State == JudgementState.Beyond).Select(j => (JsonNode)Open(charter, tick, j, withheld))];

    private static JsonObject Open(Charter charter, TickResult tick, Judgement judgement, WithheldCells withheld)
    {
        JsonObject alert = Of(judgement, withheld);
        alert["state"] = "open";
        alert["opened_at"] = EventTime.Text(tick.AsOf);
        Text(alert, "owner", judgement.Declared?.Owner ?? charter.Owner);
        Text(alert, "runbook", judgement.Declared?.Runbook ?? charter.Runbook);
        IEnumerable<KeyValuePair<string, string>> labels = (judgement.Declared?.Labels ?? new Dictionary<string, string>())
            .Concat(charter.Labels)
            .DistinctBy(l => l.Key);
        alert["labels"] = new JsonObject(labels.Select(l => KeyValuePair.Create(l.Key, (JsonNode?)l.Value)));
        return alert;
    }

    private static JsonObject Of(Judgement judgement, WithheldCells withheld)
    {
        JsonObject row = new()
        {
            ["alert"] = judgement.Rule,
            ["kind"] = judgement.Kind,
            ["severity"] = SeverityName(judgement.Severity),
            ["state"] = judgement.State.Name(),
        };
        if (judgement.Reading is { } reading)
        {
            row["measure"] = reading.Measure;
            row["window"] = reading.Window;
            row["basis"] = reading.Basis;
            Text(row, "grouping", reading.Grouping);
            Text(row, "group", reading.Group);
            Text(row, "reference", reading.Reference);
            Text(row, "field", reading.Field);
        }
        else
        {
            Text(row, "measure", judgement.Declared?.Measure);
        }

        Number(row, "below", judgement.Below);
        Number(row, "above", judgement.Above);
        if (!IsWithheld(judgement, withheld))
        {
            Number(row, "value", judgement.Value);
            Number(row, "low", judgement.Low);
            Number(row, "high", judgement.High);
        }

        Text(row, "note", judgement.Note);
        return row;
    }

    private static bool IsWithheld(Judgement judgement, WithheldCells withheld) =>
        (judgement.Reading is { } now && withheld.IsWithheld(now))
        || (judgement.Before is { } before && withheld.IsWithheld(before, SnapshotBuilder.BaselineName(before.Window)));

    private static string SeverityName(AlertSeverity severity) => severity switch
    {
        AlertSeverity.Page => "page",
        AlertSeverity.Info => "info",
        _ => "ticket",
    };

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
}
