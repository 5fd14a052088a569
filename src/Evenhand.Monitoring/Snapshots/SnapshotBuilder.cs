using System.Text.Json.Nodes;
using Evenhand.Monitoring.Alerts;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Disclosure;
using Evenhand.Monitoring.Records;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>Writes the snapshot document <c>evenhand-snapshot/1</c>, ready to be sealed.</summary>
public static class SnapshotBuilder
{
    /// <summary>The version of the methods: it changes whenever a formula does.</summary>
    public const int MethodsVersion = 1;

    /// <summary>The document without hashes.</summary>
    /// <remarks>
    /// The steps: (1) plan what must not leave the store; (2) write the state without it; (3) take the numbers of withheld
    /// readings away; (4) note the readings that the written state cannot give again; (5) assemble.
    /// </remarks>
    public static JsonObject Build(SnapshotContent content)
    {
        ArgumentNullException.ThrowIfNull(content);
        TickResult tick = content.Tick;
        WindowSums[] windows = [.. tick.Sums, .. tick.Baselines.Select(Named)];
        WithheldCells withheld = DisclosurePlanner.Plan(content.Layout, windows);
        StateWriter writer = new(withheld);
        JsonObject state = writer.Write(windows);
        JsonArray rules = RulesJson.Write(tick.Judgements, withheld);
        JsonArray alerts = RulesJson.WriteOpen(content.Layout.Charter, tick, withheld);
        withheld.Apply(tick.Readings);
        Recomputation.NoteWhatRestsOnWithheld(content.Layout, state, writer.Incomplete, tick.Readings);
        return new JsonObject
        {
            ["format"] = "evenhand-snapshot/1",
            ["kind"] = content.Kind,
            ["run"] = content.Run,
            ["charter"] = Charter(content.Layout.Charter),
            ["program"] = new JsonObject { ["version"] = content.ProgramVersion, ["methods"] = MethodsVersion },
            ["as_of"] = EventTime.Text(tick.AsOf),
            ["created_at"] = EventTime.Text(content.CreatedAt),
            ["records"] = Records(content),
            ["sources"] = new JsonArray([.. content.Sources.Select(Source)]),
            ["coverage"] = new JsonArray([.. tick.Spans.Select(s => Coverage(s, tick.Sums))]),
            ["readings"] = new JsonArray([.. tick.Readings.Select(ReadingJson.Of)]),
            ["alerts"] = alerts,
            ["rules"] = rules,
            ["changes"] = new JsonArray(),
            ["fit"] = new JsonObject(),
            ["explanations"] = new JsonArray(),
            ["state"] = state,
        }.With("outcomes", content.Outcomes is null ? null : Outcomes(content.Outcomes))
            .With("labels", content.Labels is null ? null : Labels(content.Labels));
    }

    /// <summary>The name under which the state carries the sums that a window's rules compare with.</summary>
    internal static string BaselineName(string window) => $"baseline of {window}";

    private static WindowSums Named(WindowSums baseline) =>
        new(baseline.Layout, BaselineName(baseline.Window), baseline.Slice, baseline.Values);

    private static JsonObject With(this JsonObject document, string key, JsonNode? value)
    {
        if (value is not null)
        {
            document[key] = value;
        }

        return document;
    }

    private static JsonObject Charter(Charter charter) => new()
    {
        ["id"] = charter.Id,
        ["sha256"] = charter.Sha256,
        ["text"] = charter.Text,
    };

    private static JsonObject Records(SnapshotContent content)
    {
        ShardCounts c = content.Counts;
        JsonObject reasons = [];
        for (int reason = 1; reason < RejectReasonNames.Count; reason++)
        {
            if (c.ByReason[reason] > 0)
            {
                reasons[((RejectReason)reason).Name()] = CanonicalJson.Integer(c.ByReason[reason]);
            }
        }

        JsonObject records = new()
        {
            ["read"] = CanonicalJson.Integer(c.Read),
            ["used"] = CanonicalJson.Integer(c.Used),
            ["other"] = CanonicalJson.Integer(c.Other),
            ["rejected"] = CanonicalJson.Integer(c.Rejected),
            ["late"] = CanonicalJson.Integer(c.Late),
            ["ahead"] = CanonicalJson.Integer(c.Ahead),
            ["duplicate"] = CanonicalJson.Integer(c.Duplicate),
            ["held"] = CanonicalJson.Integer(c.Held),
            ["excluded"] = CanonicalJson.Integer(c.Excluded),
            ["rejected_by_reason"] = reasons,
        };
        return content.EvictedIds == 0 ? records : records.With("forgotten_ids", CanonicalJson.Integer(content.EvictedIds));
    }

    private static JsonObject Source(SnapshotSource source) => new JsonObject
    {
        ["source"] = source.Source,
        ["partition"] = source.Partition,
        ["next_offset"] = CanonicalJson.Integer(source.NextOffset),
    };

    private static JsonObject Coverage(WindowSpan span, IReadOnlyList<WindowSums> sums)
    {
        WindowSums window = sums.First(s => s.Window == span.Name && s.Slice is null);
        CellCounts everyone = window.Counts(window.Layout.Groupings[0], 0);
        return new JsonObject
        {
            ["window"] = span.Name,
            ["from"] = EventTime.Text(span.From),
            ["to"] = EventTime.Text(span.To),
            ["records"] = CanonicalJson.Integer(everyone.Decided + everyone.Other),
        };
    }

    private static JsonObject Labels(LabelsCount count) => new()
    {
        ["read"] = CanonicalJson.Integer(count.Read),
        ["kept"] = CanonicalJson.Integer(count.Kept),
        ["duplicate"] = CanonicalJson.Integer(count.Duplicate),
        ["rejected"] = CanonicalJson.Integer(count.Rejected),
        ["filled"] = CanonicalJson.Integer(count.Filled),
        ["late"] = CanonicalJson.Integer(count.Late),
    };

    private static JsonObject Outcomes(OutcomesCount count) => new()
    {
        ["read"] = CanonicalJson.Integer(count.Read),
        ["matched"] = CanonicalJson.Integer(count.Matched),
        ["unmatched"] = CanonicalJson.Integer(count.Unmatched),
        ["outside"] = CanonicalJson.Integer(count.Outside),
        ["excluded"] = CanonicalJson.Integer(count.Excluded),
        ["duplicate"] = CanonicalJson.Integer(count.Duplicate),
        ["rejected"] = CanonicalJson.Integer(count.Rejected),
    };
}
