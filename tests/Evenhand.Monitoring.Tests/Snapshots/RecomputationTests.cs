using System.Text.Json.Nodes;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Snapshots;
using Evenhand.Monitoring.Tests.Windows;
using Evenhand.Monitoring.Windows;
using Xunit;

namespace Evenhand.Monitoring.Tests.Snapshots;

public sealed class RecomputationTests
{
    [Theory]
    [InlineData(0, 3000)]
    [InlineData(10, 3000)]
    [InlineData(10, 200)]
    public void Compare_SnapshotAsBuilt_DiffersNowhere(int minimumCell, int records)
    {
        Charter charter = SampleSnapshot.Charter(minimumCell);
        JsonObject document = SampleSnapshot.Build(charter, SampleStream.Random(11, records, 12 * EventTime.Day));

        RecomputeReport report = Recomputation.Compare(document, charter);

        Assert.Empty(report.Differences);
        Assert.True(report.Compared > 100);
        Assert.True(minimumCell > 0 || report.NotRecomputable == 0);
    }

    /// <summary>Where the charter names no reference, the group of the highest rate may itself be withheld.</summary>
    [Theory]
    [InlineData(40)]
    [InlineData(120)]
    [InlineData(300)]
    public void Compare_ReferenceNotNamed_DiffersNowhere(int records)
    {
        Charter charter = SampleStream.Charter(minimumCell: 10, reference: null);
        JsonObject document = SampleSnapshot.Build(charter, SampleStream.Random(records, records, EventTime.Day));

        Assert.Empty(Recomputation.Compare(document, charter).Differences);
    }

    [Fact]
    public void Compare_ChangedReading_IsNamed()
    {
        Charter charter = SampleSnapshot.Charter(0);
        JsonObject document = SampleSnapshot.Build(charter, SampleStream.Random(12, 2000, 12 * EventTime.Day));
        JsonObject reading = document["readings"]!.AsArray().Select(r => r!.AsObject()).First(r => (string?)r["measure"] == "selection_rate_gap" && (string?)r["window"] == "10d");
        reading["value"] = (double)reading["value"]! + 1e-6;

        string difference = Assert.Single(Recomputation.Compare(document, charter).Differences);

        Assert.Contains("10d  selection_rate_gap observed language hill", difference, StringComparison.Ordinal);
        Assert.Contains("value", difference, StringComparison.Ordinal);
    }

    [Fact]
    public void Compare_ChangedState_IsNamed()
    {
        Charter charter = SampleSnapshot.Charter(0);
        JsonObject document = SampleSnapshot.Build(charter, SampleStream.Random(13, 2000, 12 * EventTime.Day));
        JsonNode all = document["state"]!["windows"]!.AsArray().First(w => (string?)w!["window"] == "all" && w["slice"] is null)!["groupings"]![1]!["cells"]![0]!;
        all["favourable"] = (long)all["favourable"]! + 1;

        Assert.NotEmpty(Recomputation.Compare(document, charter).Differences);
    }

    [Fact]
    public void Compare_WithoutState_SaysSo()
    {
        Charter charter = SampleSnapshot.Charter(0);
        JsonObject document = SampleSnapshot.Build(charter, SampleStream.Random(14, 100, EventTime.Day));
        document.Remove("state");
        Assert.Throws<FormatException>(() => Recomputation.Compare(document, charter));
    }
}
