using System.Buffers;
using System.Text;
using CsCheck;
using Evenhand.Monitoring.Records;
using Xunit;

namespace Evenhand.Monitoring.Tests.Records;

public sealed class EncodedRecordTests
{
    // Frozen: what was stored must be read for ever. Packed after the table of encoded-record-format.md by a program in
    // another language (Python's struct module).
    private const string Frozen =
        "01010202050040e26562afdd06000700000000000000"
        + "101112131415161718191a1b1c1d1e1f202122232425262728292a2b2c2d2e2f"
        + "feffffffffffffff"
        + "01000000030002000100"
        + "0300000076c3a900000000";

    private static readonly EncodedRecord Sample = new()
    {
        Time = 1_932_595_200_123_456,
        Position = 7,
        Id = new IdHash(0x1716151413121110, 0x1F1E1D1C1B1A1918),
        CaseId = new IdHash(0x2726252423222120, 0x2F2E2D2C2B2A2928),
        Decision = DecisionCode.Favourable,
        Outcome = OutcomeCode.Negative,
        Score = RecordBatch.UnlistedScore,
        Codes = [1, 0, 3, 2, 1],
        Slices = ["vé", ""],
    };

    [Fact]
    public void WriteTo_Record_GivesTheFrozenBytes() => Assert.Equal(Frozen, Convert.ToHexStringLower(Bytes(Sample)));

    [Fact]
    public void TryRead_FrozenBytes_GivesTheRecord()
    {
        Assert.True(EncodedRecord.TryRead(Convert.FromHexString(Frozen), PlacesCharter.Layout, out EncodedRecord? record, out int length));
        Assert.Equal(Frozen.Length / 2, length);
        Assert.Equivalent(Sample, record, strict: true);
    }

    [Fact]
    public void Codes_OfTheStoredEnumerations_NeverChange()
    {
        Assert.Equal([0, 1, 2], ((DecisionCode[])[DecisionCode.Unfavourable, DecisionCode.Favourable, DecisionCode.Other]).Select(d => (int)d));
        Assert.Equal([0, 1, 2], ((OutcomeCode[])[OutcomeCode.Unknown, OutcomeCode.Positive, OutcomeCode.Negative]).Select(o => (int)o));
        Assert.Equal((-1L, -2L, 1L << 40), (RecordBatch.MissingScore, RecordBatch.UnlistedScore, RecordBatch.ScoreUnit));
        Assert.Equal(
            "None=0 MalformedJson=1 InvalidUtf8=2 TooLong=3 TooDeep=4 DuplicateKey=5 NotAnObject=6 BlankLine=7 RaggedRow=8 MissingId=9 BadId=10 "
            + "MissingTime=11 BadTime=12 MissingDecision=13 UnknownDecision=14 LoneSurrogate=15 MissingOutcome=16 UnknownOutcome=17",
            string.Join(' ', Enum.GetValues<RejectReason>().Select(r => $"{r}={(int)r}")));
    }

    /// <summary>Out of a batch, into bytes, one behind the other, back and into a batch: the same entries.</summary>
    [Fact]
    public void TryRead_RecordsBehindOneAnother_GivesThemBack()
    {
        RecordBatch batch = new(PlacesCharter.Layout, 100), back = new(PlacesCharter.Layout, 100);
        JsonRecordDecoder decoder = PlacesCharter.NewDecoder();
        for (int i = 0; i < 100; i++)
        {
            string people = i % 3 == 0 ? "null" : $"[{{\"language\":\"{(i % 2 == 0 ? "hill" : "elvish")}\"}},{{\"age\":{i}}}]";
            string score = (i / 80.0).ToString(System.Globalization.CultureInfo.InvariantCulture);
            decoder.Decode(
                Encoding.UTF8.GetBytes($$"""{"case":"c{{i}}","n":2,"at":"2031-03-01T00:00:{{i % 60:00}}Z","decision":"fast","people":{{people}},"meta":{"score":{{score}},"version":"{{new string('é', i)}}"} }"""),
                batch,
                i);
        }

        ArrayBufferWriter<byte> written = new();
        for (int i = 0; i < 100; i++)
        {
            EncodedRecord.Of(batch, i).WriteTo(written);
        }

        ReadOnlySpan<byte> bytes = written.WrittenSpan;
        while (!bytes.IsEmpty)
        {
            Assert.True(EncodedRecord.TryRead(bytes, PlacesCharter.Layout, out EncodedRecord? record, out int length));
            record.AddTo(back);
            bytes = bytes[length..];
        }

        Assert.Equal(100, back.Count);
        Assert.All(Enumerable.Range(0, 100), i => Assert.Equal(DecodedRecord.Of(batch, i), DecodedRecord.Of(back, i)));
        Assert.Equal(batch.Positions, back.Positions);
    }

    [Fact]
    public void TryRead_CutBytes_IsRefused()
    {
        byte[] bytes = Convert.FromHexString(Frozen);
        Assert.All(Enumerable.Range(0, bytes.Length), length => Assert.False(EncodedRecord.TryRead(bytes.AsSpan(0, length), PlacesCharter.Layout, out _, out _)));
    }

    // Version, decision, outcome, slices, fields; sign bytes of time, position and score; a code; a text's length; UTF-8.
    [Theory]
    [InlineData(0, 2)]
    [InlineData(1, 3)]
    [InlineData(2, 3)]
    [InlineData(3, 1)]
    [InlineData(4, 4)]
    [InlineData(5, 1)]
    [InlineData(13, 0x7F)]
    [InlineData(21, 0x80)]
    [InlineData(54, 0xFD)]
    [InlineData(61, 0x7F)]
    [InlineData(62, 7)]
    [InlineData(75, 0x80)]
    [InlineData(76, 0xFF)]
    public void TryRead_ByteOutOfRange_IsRefused(int at, byte value)
    {
        byte[] bytes = Convert.FromHexString(Frozen);
        bytes[at] = value;
        Assert.False(EncodedRecord.TryRead(bytes, PlacesCharter.Layout, out EncodedRecord? record, out int length));
        Assert.Null(record);
        Assert.Equal(0, length);
    }

    [Fact]
    public void TryRead_AnyBytes_NeverThrows() =>
        Gen.Select(Gen.Byte.Array[0, 100], Gen.Int[0, 80]).Sample((bytes, kept) =>
        {
            byte[] damaged = [.. Convert.FromHexString(Frozen).Take(kept), .. bytes];
            if (EncodedRecord.TryRead(damaged, PlacesCharter.Layout, out EncodedRecord? record, out int length))
            {
                Assert.Equal(damaged[..length], Bytes(record));
            }
        });

    [Fact]
    public void Of_Rejection_Throws()
    {
        RecordBatch batch = new(PlacesCharter.Layout, 1);
        batch.Reject(RejectReason.BlankLine, 0);
        Assert.Throws<ArgumentException>(() => EncodedRecord.Of(batch, 0));
        Assert.Throws<ArgumentOutOfRangeException>(() => EncodedRecord.Of(batch, 1));
    }

    private static byte[] Bytes(EncodedRecord record)
    {
        ArrayBufferWriter<byte> writer = new();
        record.WriteTo(writer);
        return writer.WrittenSpan.ToArray();
    }
}
