using System.Text;
using System.Text.Json;
using CsCheck;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;
using Xunit;

namespace Evenhand.Monitoring.Tests.Records;

public sealed class JsonRecordDecoderTests
{
    private const string Good = """{"case":"c1","at":"2031-03-01T00:00:00Z","decision":"fast","household":{"language":"hill"},"ages":[7,30],"score":0.5,"version":"1"}""";

    private static readonly Charter Charter = new()
    {
        Id = "flood-grants",
        Title = "Flood-repair grants",
        RecordId = new FieldPath(["/case"]),
        Time = new TimeField(new FieldPath(["/at"]), TimeUnit.Rfc3339),
        Decision = new DecisionField(new FieldPath(["/decision"]), ["fast"], ["slow"], ["withdrawn"]),
        Score = new ScoreField(new FieldPath(["/score"]), 0, 1),
        Slices = [new SliceField("version", new FieldPath(["/version"]), null)],
        Groups =
        [
            new GroupField { Name = "language", At = new FieldPath(["/household/language", "/language"]), Values = ["river", "hill", "1"], Missing = ["unknown"], Declined = ["not_stated"] },
            new GroupField { Name = "age", At = new FieldPath(["/ages/1"]), Bands = [18, 40] },
        ],
    };

    public static TheoryData<string, RejectReason> Lines() => new()
    {
        { Good, RejectReason.None },
        { "", RejectReason.BlankLine },
        { " \t", RejectReason.BlankLine },
        { "42", RejectReason.NotAnObject },
        { "[1]", RejectReason.NotAnObject },
        { "null", RejectReason.NotAnObject },
        { Good + "x", RejectReason.MalformedJson },
        { Good[..^1], RejectReason.MalformedJson },
        { Good.Replace("0.5", "NaN", StringComparison.Ordinal), RejectReason.MalformedJson },
        { Good.Replace("0.5", "Infinity", StringComparison.Ordinal), RejectReason.MalformedJson },
        { Good.Replace("0.5", "01", StringComparison.Ordinal), RejectReason.MalformedJson },
        { Good.Replace("\"c1\"", "\"c\u0001\"", StringComparison.Ordinal), RejectReason.MalformedJson },
        { new string('[', 100_000), RejectReason.TooDeep },
        { "{\"pad\":" + string.Concat(Enumerable.Repeat("{\"a\":", 70)) + "1" + new string('}', 71), RejectReason.TooDeep },
        { Good[..^1] + ",\"case\":\"c2\"}", RejectReason.DuplicateKey },
        { Good[..^1] + ",\"household\":{}}", RejectReason.DuplicateKey },
        { Good[..^1] + ",\"other\":1,\"other\":2}", RejectReason.None },
        { Good.Replace("\"hill\"", "\"\\ud800\"", StringComparison.Ordinal), RejectReason.LoneSurrogate },
        { Good.Replace("\"c1\"", "null", StringComparison.Ordinal), RejectReason.MissingId },
        { Good.Replace("\"c1\"", "{}", StringComparison.Ordinal), RejectReason.BadId },
        { Good.Replace("\"c1\"", "17", StringComparison.Ordinal), RejectReason.None },
        { Good.Replace("\"2031-03-01T00:00:00Z\"", "null", StringComparison.Ordinal), RejectReason.MissingTime },
        { Good.Replace("2031-03-01T00:00:00Z", "2031-02-29T00:00:00Z", StringComparison.Ordinal), RejectReason.BadTime },
        { Good.Replace("2031-03-01T00:00:00Z", "2031-03-01T00:00:60Z", StringComparison.Ordinal), RejectReason.BadTime },
        { Good.Replace("2031-03-01T00:00:00Z", "2016-12-31T23:59:60Z", StringComparison.Ordinal), RejectReason.None },
        { Good.Replace("2031-03-01T00:00:00Z", "2031-03-01T05:45:00+05:45", StringComparison.Ordinal), RejectReason.None },
        { Good.Replace("2031-03-01T00:00:00Z", "2031-03-01T05:45:00+24:00", StringComparison.Ordinal), RejectReason.BadTime },
        { Good.Replace("\"fast\"", "\"maybe\"", StringComparison.Ordinal), RejectReason.UnknownDecision },
        { Good.Replace("\"fast\"", "null", StringComparison.Ordinal), RejectReason.MissingDecision },
    };

    [Theory]
    [MemberData(nameof(Lines))]
    public void Decode_Line_GivesOneEntryWithItsReason(string line, RejectReason reason)
    {
        RecordBatch batch = Decode(Encoding.UTF8.GetBytes(line));
        Assert.Equal(1, batch.Count);
        Assert.Equal(reason, batch.Rejected[0]);
    }

    [Fact]
    public void Decode_BytesThatAreNotUtf8OrTooMany_AreRejected()
    {
        Assert.Equal(RejectReason.InvalidUtf8, Decode([.. "{\"case\":\""u8, 0xFF, .. "\"}"u8]).Rejected[0]);
        Assert.Equal(RejectReason.TooLong, Decode([.. "{\"pad\":\""u8, .. Enumerable.Repeat((byte)'a', JsonRecordDecoder.MaximumLength), .. "\"}"u8]).Rejected[0]);
    }

    [Theory]
    [InlineData("\"hill\"", 1)]
    [InlineData("\"h\\u0069ll\"", 1)]
    [InlineData("1", 2)]
    [InlineData("\"1\"", 2)]
    [InlineData("1.0", 4)]
    [InlineData("true", 4)]
    [InlineData("\"elvish\"", 4)]
    [InlineData("[]", 4)]
    [InlineData("\"\"", 3)]
    [InlineData("null", 3)]
    [InlineData("\"unknown\"", 3)]
    [InlineData("\"not_stated\"", 5)]
    public void Decode_GroupValue_GivesItsCode(string value, int code) =>
        Assert.Equal(code, Decode(Encoding.UTF8.GetBytes(Good.Replace("\"hill\"", value, StringComparison.Ordinal))).CodesOf(0)[0]);

    [Theory]
    [InlineData("30", 0)]
    [InlineData("\"40\"", 1)]
    [InlineData("4e1", 1)]
    [InlineData("17.99", 3)]
    [InlineData("\"NaN\"", 3)]
    [InlineData("1e999", 3)]
    [InlineData("\"\"", 2)]
    public void Decode_BandedValue_GivesItsCode(string value, int code) =>
        Assert.Equal(code, Decode(Encoding.UTF8.GetBytes(Good.Replace("[7,30]", $"[7,{value}]", StringComparison.Ordinal))).CodesOf(0)[1]);

    [Fact]
    public void Decode_FirstPlaceAbsent_TakesTheNext()
    {
        string line = Good.Replace("\"household\":{\"language\":\"hill\"}", "\"language\":\"river\"", StringComparison.Ordinal);
        Assert.Equal(0, Decode(Encoding.UTF8.GetBytes(line)).CodesOf(0)[0]);
    }

    [Fact]
    public void Decode_AfterWarmUp_AllocatesNothing()
    {
        JsonRecordDecoder decoder = NewDecoder();
        RecordBatch batch = new(new RecordLayout(Charter), 256);
        byte[] line = Encoding.UTF8.GetBytes(Good), escaped = Encoding.UTF8.GetBytes(Good.Replace("hill", "h\\u0069ll", StringComparison.Ordinal));
        void Run(int count)
        {
            for (int i = 0; i < count; i++)
            {
                batch.Clear();
                for (int j = 0; j < 250; j++)
                {
                    decoder.Decode(j % 7 == 0 ? escaped : line, batch, j);
                }
            }
        }

        Run(40);
        long before = GC.GetAllocatedBytesForCurrentThread();
        Run(40);
        Assert.Equal(0, GC.GetAllocatedBytesForCurrentThread() - before);
    }

    /// <summary>The scanner against the platform's own reader: they take and refuse the same lines.</summary>
    [Fact]
    public void Decode_DamagedLines_AreMalformedWhereThePlatformsReaderSaysSo()
    {
        byte[] good = Encoding.UTF8.GetBytes(Good.Replace("\"version\"", "\"e\\u0041\\n\":[true,false,null,-1.5e-3,{\"z\":\"\\\"\"}],\"version\"", StringComparison.Ordinal));
        Gen.Select(Gen.Int[0, good.Length - 1], Gen.OneOf(Gen.Byte, Gen.Int[0, 15].Select(i => "{}[]\",:\\eE+-.0\u0001 "u8[i])), Gen.Int[0, 2]).Array[1, 4].Sample(
            edits =>
            {
                List<byte> bytes = [.. good];
                foreach ((int at, byte value, int kind) in edits)
                {
                    int place = at % bytes.Count;
                    if (kind == 0)
                    {
                        bytes[place] = value;
                    }
                    else if (kind == 1)
                    {
                        bytes.Insert(place, value);
                    }
                    else
                    {
                        bytes.RemoveAt(place);
                    }
                }

                byte[] line = [.. bytes];
                RejectReason reason = Decode(line).Rejected[0];
                if (System.Text.Unicode.Utf8.IsValid(line) && line.AsSpan().IndexOfAny((byte)'\n', (byte)'\r') < 0)
                {
                    Assert.True(IsJson(line) == (reason is not RejectReason.MalformedJson and not RejectReason.BlankLine), Encoding.UTF8.GetString(line) + " " + reason);
                }
            },
            iter: 20_000);
    }

    private static bool IsJson(byte[] line)
    {
        try
        {
            Utf8JsonReader reader = new(line, new JsonReaderOptions { MaxDepth = 64 });
            while (reader.Read())
            {
            }

            return true;
        }
        catch (JsonException)
        {
            return false;
        }
    }

    private static JsonRecordDecoder NewDecoder() => new(Charter, new RecordLayout(Charter), new IdHasher(new byte[IdHasher.KeyLength]), RecordKind.Decision);

    private static RecordBatch Decode(byte[] line)
    {
        RecordBatch batch = new(new RecordLayout(Charter), 1);
        NewDecoder().Decode(line, batch, 0);
        return batch;
    }
}
