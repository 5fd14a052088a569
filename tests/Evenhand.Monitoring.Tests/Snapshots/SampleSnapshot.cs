using System.Text.Json.Nodes;
using Evenhand.Monitoring.Alerts;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Snapshots;
using Evenhand.Monitoring.Tests.Windows;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Tests.Snapshots;

/// <summary>Snapshot documents of the tests' streams.</summary>
internal static class SampleSnapshot
{
    public static Charter Charter(int minimumCell) => SampleCharter(minimumCell) with
    {
        Alerts =
        [
            new AlertRule { Name = "ratio", Measure = "impact_ratio", Grouping = "language", Window = "10d", Below = 0.8 },
            new AlertRule { Name = "shift", Measure = "selection_rate_gap", Grouping = "language", Window = "24h", Shift = 0.05 },
            new AlertRule { Name = "quiet", NoRecordsFor = SampleStream.Duration("1d", 1) },
        ],
    };

    public static JsonObject Build(Charter charter, IEnumerable<SampleRecord> records)
    {
        SumLayout layout = new(charter);
        Shard shard = SampleStream.NewShard(charter);
        SampleStream.Feed(shard, charter, records);
        long asOf = EventTime.Floor(shard.Newest!.Value, EventTime.Minute) + EventTime.Minute;
        return SnapshotBuilder.Build(new SnapshotContent
        {
            Kind = "replay",
            Run = new string('0', 64),
            ProgramVersion = "0.0.0",
            Layout = layout,
            CreatedAt = asOf,
            Tick = new Tick(layout, [shard]).At(asOf, shard.Counts, withAll: true),
            Counts = shard.Counts,
            Sources = [new SnapshotSource("file:decisions.ndjson", 0, shard.NextOffsets[0])],
        });
    }

    private static Charter SampleCharter(int minimumCell) => SampleStream.Charter(minimumCell: minimumCell);
}
