using System.Text;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;
using Evenhand.Monitoring.Windows;
using Xunit;

namespace Evenhand.Monitoring.Tests.Windows;

/// <summary>Outcomes of cases that are decided in several revisions.</summary>
public sealed class RevisionOutcomeTests
{
    private static readonly Charter Charter = SampleStream.Charter() with { Revision = new FieldPath(["/n"]) };
    private static readonly SumLayout Layout = new(Charter);
    private static readonly IdHasher Hasher = new(new byte[IdHasher.KeyLength]);

    [Fact]
    public void Outcomes_WithoutARevision_CountForEveryRevisionOfTheCase() =>
        Assert.Equal((3, 0), Run([Decision("c1", "1"), Decision("c1", "2"), Decision("c1", "3"), Decision("c2", "1")], [Outcome("c1", null, "yes")]));

    [Fact]
    public void Outcomes_WithARevision_CountForThatAlone() =>
        Assert.Equal((1, 0), Run([Decision("c1", "1"), Decision("c1", "2"), Decision("c1", null)], [Outcome("c1", "2", "yes")]));

    [Fact]
    public void Outcomes_WithBoth_ThePairGoesBeforeTheIdAlone() =>
        Assert.Equal((1, 2), Run([Decision("c1", "1"), Decision("c1", "2"), Decision("c1", "3")], [Outcome("c1", null, "no"), Outcome("c1", "2", "yes")]));

    [Fact]
    public void Outcomes_WithoutARevision_AreMatchedOnceAndLeaveNoneOver()
    {
        (Shard shard, OutcomeIndex outcomes) = Feed([Decision("c1", "1"), Decision("c1", "2")], [Outcome("c1", null, "yes"), Outcome("c9", null, "yes")]);
        Assert.Equal(1, shard.Counts.OutcomesMatched);
        Assert.Equal(1, outcomes.Count - outcomes.FoundCount);
    }

    [Fact]
    public void CaseIds_OfACharterWithoutRevision_AreTheIds()
    {
        RecordBatch batch = Decode(Charter with { Revision = null }, RecordKind.Decision, [Decision("c1", "1")]);
        Assert.Equal(batch.Ids[0], batch.CaseIds[0]);
        Assert.Equal(Hasher.Hash("c1"u8), batch.Ids[0]);
    }

    [Fact]
    public void Bind_OutcomeTableWithoutARevision_IsEnough()
    {
        RowDecoder decoder = new(Charter, Layout.Records, Hasher, RecordKind.Outcome);
        Assert.DoesNotContain(decoder.Bind(["case", "upheld"]), c => c.Required);
        RecordBatch batch = new(Layout.Records, 1);
        decoder.Begin();
        decoder.Set(0, "c1"u8);
        decoder.Set(1, "yes"u8);
        decoder.End(batch, 0);
        Assert.Equal(Decode(Charter, RecordKind.Decision, [Decision("c1", "7")]).CaseIds[0], batch.Ids[0]);
    }

    private static (long Positive, long Negative) Run(string[] decisions, string[] outcomes)
    {
        (Shard shard, _) = Feed(decisions, outcomes);
        long[] sums = new long[Layout.Length];
        shard.AddWindow(WindowSpan.All(0, long.MaxValue), 0, sums);
        CellCounts counts = new WindowSums(Layout, "all", null, sums).Counts(Layout.Groupings[0], 0);
        return (counts.Positive, counts.Negative);
    }

    private static (Shard Shard, OutcomeIndex Outcomes) Feed(string[] decisions, string[] outcomes)
    {
        OutcomeIndex index = new();
        index.Add(Decode(Charter, RecordKind.Outcome, outcomes));
        Shard shard = SampleStream.NewShard(Charter, outcomes: index);
        shard.Add(Decode(Charter, RecordKind.Decision, decisions), 0);
        return (shard, index);
    }

    private static RecordBatch Decode(Charter charter, RecordKind kind, string[] lines)
    {
        JsonRecordDecoder decoder = new(charter, new RecordLayout(charter), Hasher, kind);
        RecordBatch batch = new(new RecordLayout(charter), lines.Length);
        for (int i = 0; i < lines.Length; i++)
        {
            decoder.Decode(Encoding.UTF8.GetBytes(lines[i]), batch, i);
            Assert.Equal(RejectReason.None, batch.Rejected[i]);
        }

        return batch;
    }

    private static string Decision(string id, string? revision) =>
        $$"""{"case":"{{id}}",{{(revision is null ? "" : $"\"n\":{revision},")}}"at":"2031-03-30T00:00:00Z","decision":"fast","language":"river"}""";

    private static string Outcome(string id, string? revision, string outcome) =>
        $$"""{"case":"{{id}}",{{(revision is null ? "" : $"\"n\":{revision},")}}"upheld":"{{outcome}}"}""";
}
