using System.Buffers;

namespace Evenhand.Monitoring.Records;

/// <summary>One encoded record apart from its batch, as it is held until its outcome or its labels arrive.</summary>
/// <remarks>Its stored form is <c>evenhand-encoded-record/1</c>, described in <c>encoded-record-format.md</c>: the order of bytes never changes.</remarks>
public sealed class EncodedRecord
{
    /// <summary>Event time in microseconds since 1970-01-01T00:00:00Z.</summary>
    public required long Time { get; init; }

    /// <summary>The position in its source, from 0.</summary>
    public required long Position { get; init; }

    /// <summary>Hashed id; with a revision, of the pair.</summary>
    public required IdHash Id { get; init; }

    /// <summary>Hashed id as an outcome without a revision has it.</summary>
    public required IdHash CaseId { get; init; }

    /// <summary>The decision.</summary>
    public required DecisionCode Decision { get; init; }

    /// <summary>The outcome.</summary>
    public required OutcomeCode Outcome { get; init; }

    /// <summary>Score in units of <see cref="RecordBatch.ScoreUnit"/>, or <see cref="RecordBatch.MissingScore"/>, <see cref="RecordBatch.UnlistedScore"/>.</summary>
    public required long Score { get; init; }

    /// <summary>Codes in the order of <see cref="RecordLayout.Fields"/>.</summary>
    public required IReadOnlyList<ushort> Codes { get; init; }

    /// <summary>Slice values in charter order; empty where missing.</summary>
    public required IReadOnlyList<string> Slices { get; init; }

    /// <summary>Copies an entry out of a batch.</summary>
    /// <param name="batch">The batch.</param>
    /// <param name="entry">Below the batch's count.</param>
    /// <exception cref="ArgumentOutOfRangeException">There is no such entry.</exception>
    /// <exception cref="ArgumentException">The entry is a rejection.</exception>
    public static EncodedRecord Of(RecordBatch batch, int entry)
    {
        ArgumentNullException.ThrowIfNull(batch);
        ArgumentOutOfRangeException.ThrowIfNegative(entry);
        ArgumentOutOfRangeException.ThrowIfGreaterThanOrEqual(entry, batch.Count);
        if (batch.Rejected[entry] != RejectReason.None)
        {
            throw new ArgumentException($"Entry {entry} is a rejection.", nameof(entry));
        }

        string[] slices = new string[batch.SliceCount];
        for (int slice = 0; slice < slices.Length; slice++)
        {
            slices[slice] = System.Text.Encoding.UTF8.GetString(batch.SliceOf(entry, slice));
        }

        return new EncodedRecord
        {
            Time = batch.Times[entry],
            Position = batch.Positions[entry],
            Id = batch.Ids[entry],
            CaseId = batch.CaseIds[entry],
            Decision = batch.Decisions[entry],
            Outcome = batch.Outcomes[entry],
            Score = batch.Scores[entry],
            Codes = batch.CodesOf(entry).ToArray(),
            Slices = slices,
        };
    }

    /// <summary>Puts the record into a batch as its next entry.</summary>
    /// <param name="batch">Not full, of the same layout.</param>
    /// <exception cref="ArgumentException">The batch is of another layout.</exception>
    public void AddTo(RecordBatch batch)
    {
        ArgumentNullException.ThrowIfNull(batch);
        if (batch.FieldCount != Codes.Count || batch.SliceCount != Slices.Count)
        {
            throw new ArgumentException($"The batch holds records of {batch.FieldCount} fields and {batch.SliceCount} slices; this one has {Codes.Count} and {Slices.Count}.", nameof(batch));
        }

        int entry = batch.Count;
        batch.Times[entry] = Time;
        batch.Ids[entry] = Id;
        batch.CaseIds[entry] = CaseId;
        batch.Decisions[entry] = Decision;
        batch.Outcomes[entry] = Outcome;
        batch.Scores[entry] = Score;
        Span<ushort> codes = batch.CodesOf(entry);
        for (int field = 0; field < codes.Length; field++)
        {
            codes[field] = Codes[field];
        }

        for (int slice = 0; slice < Slices.Count; slice++)
        {
            batch.SetSlice(slice, System.Text.Encoding.UTF8.GetBytes(Slices[slice]));
        }

        batch.Accept(Position);
    }

    /// <summary>Writes the stored form.</summary>
    /// <exception cref="OverflowException">More than 65,535 fields or 255 slices.</exception>
    public void WriteTo(IBufferWriter<byte> writer)
    {
        ArgumentNullException.ThrowIfNull(writer);
        EncodedRecordForm.Write(this, writer);
    }

    /// <summary>Reads one stored form, as the first bytes of a stretch that may hold more.</summary>
    /// <param name="bytes">The stretch.</param>
    /// <param name="layout">The charter's layout: a record of other fields, or with codes that a field does not have, is refused.</param>
    /// <param name="record">The record; null where false is returned.</param>
    /// <param name="length">Bytes of the form; 0 where false is returned.</param>
    /// <returns>False where the bytes are cut, damaged, of another version or of another layout.</returns>
    public static bool TryRead(ReadOnlySpan<byte> bytes, RecordLayout layout, [System.Diagnostics.CodeAnalysis.NotNullWhen(true)] out EncodedRecord? record, out int length)
    {
        ArgumentNullException.ThrowIfNull(layout);
        return EncodedRecordForm.TryRead(bytes, layout, out record, out length);
    }
}
