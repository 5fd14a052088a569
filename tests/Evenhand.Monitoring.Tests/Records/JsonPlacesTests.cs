using System.Text;
using Evenhand.Monitoring.Records;
using Xunit;

namespace Evenhand.Monitoring.Tests.Records;

public sealed class JsonPlacesTests
{
    private const string Start = """{"case":"c1","n":1,"at":"2031-03-01T00:00:00Z","decision":"fast" """;

    // Codes: language, age, office, nameless, tag.
    [Theory]
    [InlineData("""{"people":[{"language":"hill"},{"age":18}]}""", "1 0 2 1 2")]
    [InlineData("""{"people":[{"language":null},{"age":40}],"language":"river"}""", "0 1 2 1 2")]
    [InlineData("""{"language":"river","people":[{"language":"hill"}]}""", "1 2 2 1 2")]
    [InlineData("""{"people":[{"language":""}],"language":"river"}""", "4 2 2 1 2")]
    [InlineData("""{"people":[{"language":[]}],"language":"river"}""", "5 2 2 1 2")]
    [InlineData("""{"p\u0065ople":[{"languag\u0065":"h\u0069ll"}]}""", "1 2 2 1 2")]
    [InlineData("""{"people":{"0":{"language":"hill"},"1":{"age":17},"01":"x"}}""", "1 3 2 1 0")]
    [InlineData("""{"people":[0,{"age":1e2}],"list":[[],{},"x","y"]}""", "4 1 2 1 0")]
    [InlineData("""{"a/b":{"m~n":"quay"},"a~1b":{"m~0n":"é"}}""", "4 2 0 1 2")]
    [InlineData("""{"a\/b":{"m\u007en":"\u00e9"}}""", "4 2 1 1 2")]
    [InlineData("""{"":-1}""", "4 2 2 2 2")]
    [InlineData("""{"":0}""", "4 2 2 0 2")]
    public void Decode_PlacesOfEveryKind_AreFound(string rest, string codes)
    {
        RecordBatch batch = Decode(Start + "," + rest[1..]);
        Assert.Equal(RejectReason.None, batch.Rejected[0]);
        Assert.Equal(codes, string.Join(' ', batch.CodesOf(0).ToArray()));
    }

    [Theory]
    [InlineData("""{"c\u0061se":"c2"}""", RejectReason.DuplicateKey)]
    [InlineData("""{"people":[{"language":1,"language":1}]}""", RejectReason.DuplicateKey)]
    [InlineData("""{"meta":{},"meta":{}}""", RejectReason.DuplicateKey)]
    [InlineData("""{"meta":{"note":1,"note":2},"note":1,"note":2}""", RejectReason.None)]
    [InlineData("""{"people":[{"age":1},{"age":1}]}""", RejectReason.None)]
    [InlineData("""{"\ud800":1,"note":"\udc00"}""", RejectReason.None)]
    [InlineData("""{"language":"\udc00\ud800"}""", RejectReason.LoneSurrogate)]
    [InlineData("""{"language":"\ud83d\ude00"}""", RejectReason.None)]
    [InlineData("""{"language":"\u0000"}""", RejectReason.None)]
    public void Decode_KeysAndTexts_GiveTheReason(string rest, RejectReason reason) =>
        Assert.Equal(reason, Decode(Start + "," + rest[1..]).Rejected[0]);

    [Fact]
    public void Decode_NullRevision_IsNoRevision() =>
        Assert.Equal(
            Decode(Start.Replace("\"n\":1,", "", StringComparison.Ordinal) + "}").Ids[0],
            Decode(Start.Replace("\"n\":1,", "\"n\":null,", StringComparison.Ordinal) + "}").Ids[0]);

    [Fact]
    public void Decode_RecordOfTheGreatestLength_IsTakenAndOneByteMoreIsNot()
    {
        string end = "\"}";
        string line = Start + ",\"pad\":\"" + new string('a', JsonRecordDecoder.MaximumLength - Start.Length - 8 - end.Length) + end;
        Assert.Equal(JsonRecordDecoder.MaximumLength, line.Length);
        Assert.Equal(RejectReason.None, Decode(line).Rejected[0]);
        Assert.Equal(RejectReason.TooLong, Decode(line + " ").Rejected[0]);
    }

    [Theory]
    [InlineData("""{"case":"c1","n":1,"upheld":"yes"}""", RejectReason.None)]
    [InlineData("""{"case":"c1","upheld":true}""", RejectReason.None)]
    [InlineData("""{"case":"c1","upheld":"perhaps"}""", RejectReason.UnknownOutcome)]
    [InlineData("""{"case":"c1","upheld":{}}""", RejectReason.UnknownOutcome)]
    [InlineData("""{"case":"c1","upheld":""}""", RejectReason.MissingOutcome)]
    [InlineData("""{"case":"c1"}""", RejectReason.MissingOutcome)]
    [InlineData("""{"upheld":"yes"}""", RejectReason.MissingId)]
    [InlineData("""{"case":"c1","at":"yesterday","upheld":"yes"}""", RejectReason.BadTime)]
    public void Decode_OutcomeRecord_GivesTheReason(string line, RejectReason reason)
    {
        RecordBatch batch = new(PlacesCharter.Layout, 1);
        PlacesCharter.NewDecoder(RecordKind.Outcome).Decode(Encoding.UTF8.GetBytes(line), batch, 0);
        Assert.Equal(reason, batch.Rejected[0]);
    }

    /// <summary>10,000 records of many shapes: members in another order, left out, escaped, nested, of changing lengths.</summary>
    [Fact]
    public void Decode_MixedRecordsAfterWarmUp_AllocatesNothing()
    {
        string[] ends =
        [
            "}", ",\"upheld\":true}", ",\"people\":[{\"language\":\"hill\"},{\"age\":33}]}", ",\"meta\":{\"score\":0.25,\"version\":\"v12\"}}",
            ",\"meta\":{\"version\":\"\\u0076\",\"score\":\"1e-3\"},\"a\\/b\":{\"m~n\":\"quay\"}}", ",\"list\":[1,[2],\"x\"],\"\":7}", ",\"note\":{\"deep\":[[{}]]},\"language\":\"a text of some length, long past a word\"}",
        ];
        byte[][] lines = [.. Enumerable.Range(0, 500).Select(i => Encoding.UTF8.GetBytes(Start.Replace("c1", $"case {i * i}", StringComparison.Ordinal) + (i % 3 == 0 ? " , \"pad\" : " + i : "") + ends[i % ends.Length]))];
        JsonRecordDecoder decoder = PlacesCharter.NewDecoder();
        RecordBatch batch = new(PlacesCharter.Layout, 512);
        void Run(int rounds)
        {
            for (int round = 0; round < rounds; round++)
            {
                batch.Clear();
                for (int i = 0; i < lines.Length; i++)
                {
                    decoder.Decode(lines[i], batch, i);
                }
            }
        }

        Run(20);
        long before = GC.GetAllocatedBytesForCurrentThread();
        Run(20);
        Assert.Equal(0, GC.GetAllocatedBytesForCurrentThread() - before);
        Assert.All(Enumerable.Range(0, lines.Length), i => Assert.Equal(RejectReason.None, batch.Rejected[i]));
    }

    /// <summary>An object whose keys are ever new costs no memory in the end.</summary>
    [Fact]
    public void Decode_KeysThatAreEverNew_StopBeingRemembered()
    {
        JsonRecordDecoder decoder = PlacesCharter.NewDecoder();
        RecordBatch batch = new(PlacesCharter.Layout, 1);
        int taken = 0;
        byte[][] lines = [.. Enumerable.Range(0, 12_000).Select(i => Encoding.UTF8.GetBytes(Start + $",\"key{i}\":1}}"))];
        void Run(int from, int to)
        {
            for (int i = from; i < to; i++)
            {
                batch.Clear();
                decoder.Decode(lines[i], batch, i);
                taken += batch.Rejected[0] == RejectReason.None ? 1 : 0;
            }
        }

        Run(0, 10_000);
        long before = GC.GetAllocatedBytesForCurrentThread();
        Run(10_000, 12_000);
        Assert.Equal(0, GC.GetAllocatedBytesForCurrentThread() - before);
        Assert.Equal(12_000, taken);
    }

    private static RecordBatch Decode(string line)
    {
        RecordBatch batch = new(PlacesCharter.Layout, 1);
        PlacesCharter.NewDecoder().Decode(Encoding.UTF8.GetBytes(line), batch, 0);
        return batch;
    }
}
