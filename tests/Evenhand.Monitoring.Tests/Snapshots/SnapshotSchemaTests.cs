using System.Text.Json.Nodes;
using Evenhand.Monitoring.Snapshots;
using Evenhand.Monitoring.Tests.Windows;
using Evenhand.Monitoring.Windows;
using Evenhand.Testing;
using Xunit;

namespace Evenhand.Monitoring.Tests.Snapshots;

public sealed class SnapshotSchemaTests
{
    private static readonly ShippedSchema Schema = new(SnapshotSchema.Text);

    [Theory]
    [InlineData(0)]
    [InlineData(10)]
    public void Snapshot_AsSealed_IsValid(int minimumCell) => Assert.Equal("", Schema.Errors(Sealed(minimumCell)));

    [Fact]
    public void Snapshot_WithAnUnknownKeyOrWithoutARequiredOne_IsNotValid()
    {
        JsonObject more = Sealed(0), less = Sealed(0), wrong = Sealed(0);
        more["readings"]![0]!["surprise"] = 1;
        less["records"]!.AsObject().Remove("held");
        wrong["sha256"] = "no hash";
        Assert.All([more, less, wrong], d => Assert.NotEqual("", Schema.Errors(d)));
    }

    private static JsonObject Sealed(int minimumCell)
    {
        JsonObject document = SampleSnapshot.Build(SampleSnapshot.Charter(minimumCell), SampleStream.Random(31, 400, 12 * EventTime.Day));
        document["charter"]!["sha256"] = new string('0', 64);
        return JsonNode.Parse(SnapshotSeal.Seal(document, 1, SnapshotSeal.Genesis).Bytes)!.AsObject();
    }
}
