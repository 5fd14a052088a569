using System.Buffers;
using System.Diagnostics.CodeAnalysis;
using System.Text;
using System.Text.Unicode;
using static System.Buffers.Binary.BinaryPrimitives;

namespace Evenhand.Monitoring.Records;

/// <summary>The bytes of <c>evenhand-encoded-record/1</c>: a head of fixed length, the codes, the slice values.</summary>
internal static class EncodedRecordForm
{
    public const byte Version = 1;

    private const int SlicesAt = 3;
    private const int FieldsAt = 4;
    private const int TimeAt = 6;
    private const int PositionAt = 14;
    private const int IdAt = 22;
    private const int CaseIdAt = 38;
    private const int ScoreAt = 54;
    private const int HeadLength = 62;

    public static void Write(EncodedRecord record, IBufferWriter<byte> writer)
    {
        int length = HeadLength + (record.Codes.Count * sizeof(ushort));
        Span<byte> to = writer.GetSpan(length);
        to[0] = Version;
        to[1] = (byte)record.Decision;
        to[2] = (byte)record.Outcome;
        to[SlicesAt] = checked((byte)record.Slices.Count);
        WriteUInt16LittleEndian(to[FieldsAt..], checked((ushort)record.Codes.Count));
        WriteInt64LittleEndian(to[TimeAt..], record.Time);
        WriteInt64LittleEndian(to[PositionAt..], record.Position);
        Write(record.Id, to[IdAt..]);
        Write(record.CaseId, to[CaseIdAt..]);
        WriteInt64LittleEndian(to[ScoreAt..], record.Score);
        for (int field = 0; field < record.Codes.Count; field++)
        {
            WriteUInt16LittleEndian(to[(HeadLength + (field * sizeof(ushort)))..], record.Codes[field]);
        }

        writer.Advance(length);
        foreach (string slice in record.Slices)
        {
            int bytes = Encoding.UTF8.GetByteCount(slice);
            to = writer.GetSpan(sizeof(int) + bytes);
            WriteInt32LittleEndian(to, bytes);
            Encoding.UTF8.GetBytes(slice, to[sizeof(int)..]);
            writer.Advance(sizeof(int) + bytes);
        }
    }

    public static bool TryRead(ReadOnlySpan<byte> bytes, RecordLayout layout, [NotNullWhen(true)] out EncodedRecord? record, out int length)
    {
        record = null;
        length = 0;
        int fields = layout.Fields.Count;
        int at = HeadLength + (fields * sizeof(ushort));
        if (bytes.Length < at || !IsHead(bytes, layout) || !TryReadCodes(bytes[HeadLength..], layout, out ushort[] codes))
        {
            return false;
        }

        string[] slices = new string[layout.Slices];
        for (int slice = 0; slice < slices.Length; slice++)
        {
            if (!TryReadText(bytes[at..], out string? text, out int taken))
            {
                return false;
            }

            slices[slice] = text;
            at += taken;
        }

        length = at;
        record = new EncodedRecord
        {
            Time = ReadInt64LittleEndian(bytes[TimeAt..]),
            Position = ReadInt64LittleEndian(bytes[PositionAt..]),
            Id = ReadHash(bytes[IdAt..]),
            CaseId = ReadHash(bytes[CaseIdAt..]),
            Decision = (DecisionCode)bytes[1],
            Outcome = (OutcomeCode)bytes[2],
            Score = ReadInt64LittleEndian(bytes[ScoreAt..]),
            Codes = codes,
            Slices = slices,
        };
        return true;
    }

    private static bool IsHead(ReadOnlySpan<byte> bytes, RecordLayout layout) =>
        bytes[0] == Version
        && bytes[1] <= (byte)DecisionCode.Other
        && bytes[2] <= (byte)OutcomeCode.Negative
        && bytes[SlicesAt] == layout.Slices
        && ReadUInt16LittleEndian(bytes[FieldsAt..]) == layout.Fields.Count
        && ReadInt64LittleEndian(bytes[TimeAt..]) is >= TimeParser.Minimum and <= TimeParser.Maximum
        && ReadInt64LittleEndian(bytes[PositionAt..]) >= 0
        && ReadInt64LittleEndian(bytes[ScoreAt..]) is >= RecordBatch.UnlistedScore and <= RecordBatch.ScoreUnit;

    private static bool TryReadCodes(ReadOnlySpan<byte> bytes, RecordLayout layout, out ushort[] codes)
    {
        codes = new ushort[layout.Fields.Count];
        for (int field = 0; field < codes.Length; field++)
        {
            codes[field] = ReadUInt16LittleEndian(bytes[(field * sizeof(ushort))..]);
            if (codes[field] >= layout.Fields[field].CodeCount)
            {
                return false;
            }
        }

        return true;
    }

    private static bool TryReadText(ReadOnlySpan<byte> bytes, [NotNullWhen(true)] out string? text, out int taken)
    {
        text = null;
        taken = 0;
        if (bytes.Length < sizeof(int) || ReadInt32LittleEndian(bytes) is var length && (length < 0 || length > bytes.Length - sizeof(int)))
        {
            return false;
        }

        ReadOnlySpan<byte> utf8 = bytes.Slice(sizeof(int), length);
        if (!Utf8.IsValid(utf8))
        {
            return false;
        }

        text = Encoding.UTF8.GetString(utf8);
        taken = sizeof(int) + length;
        return true;
    }

    private static void Write(IdHash hash, Span<byte> to)
    {
        WriteUInt64LittleEndian(to, hash.High);
        WriteUInt64LittleEndian(to[sizeof(ulong)..], hash.Low);
    }

    private static IdHash ReadHash(ReadOnlySpan<byte> from) => new(ReadUInt64LittleEndian(from), ReadUInt64LittleEndian(from[sizeof(ulong)..]));
}
