using System.Text;
using CsCheck;
using Evenhand.Monitoring.Records;
using Xunit;

namespace Evenhand.Monitoring.Tests.Records;

/// <summary>The decoder against a slow one on the platform's own JSON documents: the same reasons, the same codes.</summary>
public sealed class JsonDecoderAgainstDocumentModelTests
{
    private static readonly string[] Keys =
    [
        "case", "c\\u0061se", "n", "at", "decision", "upheld", "language", "l\\u0061nguage", "", "a/b", "a\\/b", "people", "meta", "list",
        "score", "version", "m~n", "age", "0", "01", "2", "pad", "\\ud800", "\\\"", "é", "\\u00e9",
    ];

    private static readonly string[] Scalars =
    [
        "null", "true", "false", "0", "1", "-0", "-1.5e-3", "1e999", "17.99", "18", "40", "123456789012345678901", "\"\"", "\"c1\"", "\"river\"", "\"h\\u0069ll\"",
        "\"1\"", "\"unknown\"", "\"not_stated\"", "\"fast\"", "\"slow\"", "\"withdrawn\"", "\"yes\"", "\"no\"", "\"2031-03-01T00:00:00Z\"", "\"2031-03-01T05:45:00+05:45\"",
        "\"2031-02-29T00:00:00Z\"", "\"\\ud83d\\ude00\"", "\"\\ud83d\"", "\"\\ude00\\ud83d\"", "\"quay\"", "\"é\"", "\"\\u00E9\"", "\"x\"", "\"a \\\"long\\\" text, past a word or two\"", "0.25",
    ];

    private static readonly string[] Spaces = ["", "", "", " ", "\t", "\r\n "];

    // A record that is good as a start, so that most lines come to be coded.
    private static readonly (string Key, string Value)[] Good =
    [
        ("case", "\"c1\""), ("n", "2"), ("at", "\"2031-03-01T00:00:00Z\""), ("decision", "\"fast\""), ("upheld", "true"),
        ("people", "[{\"language\":\"hill\"},{\"age\":30}]"), ("meta", "{\"score\":0.5,\"version\":\"v1\"}"), ("a\\/b", "{\"m~n\":\"quay\"}"), ("list", "[0,1,\"x\"]"),
    ];

    private static readonly Gen<string> Space = Gen.Int[0, Spaces.Length - 1].Select(i => Spaces[i]);

    private static readonly Gen<string> Line = Gen.Select(Members(2), Gen.Int[0, 1 << Good.Length].Select(mask => Good.Where((_, i) => (mask >> i & 1) == 0)), Gen.Int[0, 3]).Select((some, good, how) =>
    {
        List<(string Key, string Value)> members = [.. good];
        // Three lines in four replace members, so that duplicates do not hide everything else.
        members.RemoveAll(m => how > 0 && some.Any(s => s.Key == m.Key));
        members.AddRange(how > 0 ? some.DistinctBy(s => s.Key) : some);
        return "{" + string.Join(',', members.Select(m => $"\"{m.Key}\":{m.Value}")) + "}";
    });

    [Fact]
    public void Decode_ComposedRecords_GivesTheSameAsTheSlowDecoder()
    {
        JsonRecordDecoder decoder = PlacesCharter.NewDecoder();
        HashSet<RejectReason> seen = [];
        Line.Sample(line => Compare(decoder, Encoding.UTF8.GetBytes(line), seen), iter: 20_000, threads: 1);
        Assert.Superset(
            new HashSet<RejectReason> { RejectReason.None, RejectReason.DuplicateKey, RejectReason.LoneSurrogate, RejectReason.MissingId, RejectReason.BadId, RejectReason.MissingTime, RejectReason.BadTime, RejectReason.MissingDecision, RejectReason.UnknownDecision },
            seen);
    }

    [Fact]
    public void Decode_DamagedRecords_GivesTheSameAsTheSlowDecoder()
    {
        JsonRecordDecoder decoder = PlacesCharter.NewDecoder();
        HashSet<RejectReason> seen = [];
        Gen<(int At, byte Value, int Kind)> edit = Gen.Select(Gen.Int[0, 999], Gen.OneOf(Gen.Byte, Gen.Int[0, 19].Select(i => "{}[]\",:\\eE+-.0u\u0001 \n\r\t"u8[i])), Gen.Int[0, 3]);
        Gen.Select(Line, edit.Array[1, 3]).Sample((line, edits) => Compare(decoder, Edited(Encoding.UTF8.GetBytes(line), edits), seen), iter: 30_000, threads: 1);
        Assert.Superset(new HashSet<RejectReason> { RejectReason.None, RejectReason.MalformedJson, RejectReason.InvalidUtf8 }, seen);
    }

    [Fact]
    public void Decode_RandomBytes_GivesTheSameAsTheSlowDecoder()
    {
        JsonRecordDecoder decoder = PlacesCharter.NewDecoder();
        Gen.Byte.Array[0, 60].Sample(bytes => Compare(decoder, bytes, []), iter: 10_000, threads: 1);
    }

    [Fact]
    public void Decode_RandomBrackets_GivesTheSameAsTheSlowDecoder()
    {
        JsonRecordDecoder decoder = PlacesCharter.NewDecoder();
        HashSet<RejectReason> seen = [];
        Gen.Select(Gen.Int[58, 70], Gen.Bool, Gen.Bool, Gen.Int[-1, 1]).Sample(
            (depth, objects, wanted, missing) =>
            {
                string open = objects ? "{\"a\":" : "[", close = objects ? "}" : "]";
                string inner = string.Concat(Enumerable.Repeat(open, depth)) + "1" + string.Concat(Enumerable.Repeat(close, Math.Max(0, depth + missing)));
                Compare(decoder, Encoding.UTF8.GetBytes($"{{\"{(wanted ? "people" : "pad")}\":{inner}}}"), seen);
            },
            threads: 1);
        Assert.Equal([RejectReason.MalformedJson, RejectReason.TooDeep, RejectReason.MissingId], seen.Order());
    }

    private static Gen<(string Key, string Value)[]> Members(int depth) =>
        Gen.Select(Gen.Int[0, Keys.Length - 1].Select(i => Keys[i]), Value(depth), Space, Space).Select((key, value, before, after) => (key, before + value + after)).Array[0, 5];

    private static Gen<string> Value(int depth)
    {
        Gen<string> scalar = Gen.Int[0, Scalars.Length - 1].Select(i => Scalars[i]);
        return depth == 0 ? scalar : Gen.Frequency(
            (6, scalar),
            (1, Members(depth - 1).Select(ms => "{" + string.Join(" ,", ms.Select(m => $"\"{m.Key}\" : {m.Value}")) + "}")),
            (1, Value(depth - 1).Array[0, 4].Select(vs => "[" + string.Join(",", vs) + " ]")));
    }

    private static byte[] Edited(byte[] line, (int At, byte Value, int Kind)[] edits)
    {
        List<byte> bytes = [.. line];
        foreach ((int at, byte value, int kind) in edits)
        {
            int place = at % Math.Max(1, bytes.Count);
            switch (kind)
            {
                case 0 when bytes.Count > 0:
                    bytes[place] = value;
                    break;
                case 1 when bytes.Count > 0:
                    bytes.RemoveAt(place);
                    break;
                case 2 when place % 7 == 0:
                    bytes.RemoveRange(place, bytes.Count - place);
                    break;
                default:
                    bytes.Insert(place, value);
                    break;
            }
        }

        return [.. bytes];
    }

    private static void Compare(JsonRecordDecoder decoder, byte[] line, HashSet<RejectReason> seen)
    {
        RecordBatch batch = new(PlacesCharter.Layout, 2);
        decoder.Decode(line, batch, 7);
        Assert.Equal(1, batch.Count);
        Assert.Equal(7, batch.Positions[0]);
        DecodedRecord expected = SlowDecoder.Decode(line, PlacesCharter.Charter, PlacesCharter.Layout, PlacesCharter.Hasher);
        Assert.Equal(expected, DecodedRecord.Of(batch, 0));
        seen.Add(expected.Reason);
    }
}
