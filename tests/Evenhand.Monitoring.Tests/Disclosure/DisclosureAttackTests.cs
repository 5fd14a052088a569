using System.Text.Json.Nodes;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Tests.Snapshots;
using Evenhand.Monitoring.Tests.Windows;
using Evenhand.Monitoring.Windows;
using Xunit;

namespace Evenhand.Monitoring.Tests.Disclosure;

/// <summary>A reader with a linear algebra program and the whole document: readings, state, baselines and shares, nothing else.</summary>
/// <remarks>
/// Written apart from what plans the withholding: the unknowns are the decided records of one version, language and age, each
/// published number is a sum of some of them, and a small cell is given away when its sum lies in the span of what is published.
/// </remarks>
public sealed class DisclosureAttackTests
{
    private const int Minimum = 10;

    [Theory]
    [InlineData(1, 90, "tenure")]
    [InlineData(2, 150, "tenure")]
    [InlineData(3, 300, "tenure")]
    [InlineData(4, 600, "tenure")]
    [InlineData(5, 1500, "tenure")]
    [InlineData(6, 4000, "tenure")]
    [InlineData(7, 150, "age")]
    [InlineData(8, 400, "age")]
    [InlineData(9, 1500, "age")]
    [InlineData(10, 600, "language")]
    public void Snapshot_AllThatIsPublishedTogether_GivesNoSmallCellAway(int seed, int records, string adjust)
    {
        Charter charter = SampleSnapshot.Charter(Minimum) with { Adjust = [new AdjustField(adjust, null)] };
        List<SampleRecord> stream = SampleStream.Random(seed, records, 9 * EventTime.Day);
        JsonObject document = SampleSnapshot.Build(charter, stream);

        PublishedCounts published = new(document, charter, "all");
        Assert.True(published.Count > 20);
        List<string> found = published.Attack(stream, Minimum);
        Assert.True(found.Count == 0, string.Join("; ", found));

        // The baseline is what came before the window that it is compared with.
        string from = (string)document["coverage"]!.AsArray().Single(c => (string)c!["window"]! == "24h")!["from"]!;
        found = new PublishedCounts(document, charter, "baseline of 24h")
            .Attack([.. stream.Where(r => string.CompareOrdinal(EventTime.Text(r.Time), from) < 0)], Minimum);
        Assert.True(found.Count == 0, "baseline: " + string.Join("; ", found));
    }

    [Fact]
    public void Attack_OfADocumentThatWithholdsTooLittle_Succeeds()
    {
        Charter charter = SampleSnapshot.Charter(0);
        List<SampleRecord> stream = SampleStream.Random(3, 300, 9 * EventTime.Day);

        Assert.NotEmpty(new PublishedCounts(SampleSnapshot.Build(charter, stream), charter, "all").Attack(stream, Minimum));
    }
}
