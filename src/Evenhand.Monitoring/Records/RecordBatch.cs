namespace Evenhand.Monitoring.Records;

/// <summary>
/// A run of encoded records and rejections in the order in which they were read; reused, so that reading allocates nothing.
/// </summary>
/// <remarks>
/// <para>Entry i is a rejection where <see cref="Rejected"/>[i] is not <see cref="RejectReason.None"/>; then only
/// <see cref="Positions"/>[i] and the raw bytes mean anything.</para>
/// <para>Codes of entry i stand at <c>Codes[i * FieldCount ..]</c>, in the order of <see cref="RecordLayout.Fields"/>.
/// Slice values are UTF-8 bytes in one buffer, since which values get a slice of their own is the shard's state, not the decoder's.</para>
/// </remarks>
public sealed class RecordBatch
{
    /// <summary>The score of a record without one.</summary>
    public const long MissingScore = -1;

    /// <summary>The score of a record whose score is no number or out of range.</summary>
    public const long UnlistedScore = -2;

    /// <summary>Score units per range: a score s is kept as round((s − low)/(high − low) · 2⁴⁰).</summary>
    public const long ScoreUnit = 1L << 40;

    // Texts are copied; without a bound a batch of long ones could outgrow an array.
    private const int MaximumTextBytes = 16 << 20;

    private readonly int[] _sliceStarts;
    private readonly int[] _rejectedStarts;
    private readonly bool _keepsRejected;
    private byte[] _sliceBytes;
    private byte[] _rejectedBytes = [];

    /// <summary>Makes room for a number of entries.</summary>
    /// <param name="layout">The charter's layout.</param>
    /// <param name="capacity">At least 1.</param>
    /// <param name="keepRejected">Whether the bytes of rejected records are kept, for the rejected store.</param>
    public RecordBatch(RecordLayout layout, int capacity, bool keepRejected = false)
    {
        ArgumentNullException.ThrowIfNull(layout);
        ArgumentOutOfRangeException.ThrowIfLessThan(capacity, 1);
        Capacity = capacity;
        FieldCount = layout.Fields.Count;
        SliceCount = layout.Slices;
        Times = new long[capacity];
        Ids = new IdHash[capacity];
        CaseIds = new IdHash[capacity];
        Decisions = new DecisionCode[capacity];
        Outcomes = new OutcomeCode[capacity];
        Scores = new long[capacity];
        Rejected = new RejectReason[capacity];
        Positions = new long[capacity];
        Codes = new ushort[capacity * FieldCount];
        _sliceStarts = new int[(capacity * SliceCount) + 1];
        _sliceBytes = new byte[256];
        _keepsRejected = keepRejected;
        _rejectedStarts = new int[capacity + 1];
    }

    /// <summary>Most entries.</summary>
    public int Capacity { get; }

    /// <summary>Entries there are.</summary>
    public int Count { get; private set; }

    /// <summary>Coded fields of a record.</summary>
    public int FieldCount { get; }

    /// <summary>Slice fields of a record.</summary>
    public int SliceCount { get; }

    /// <summary>Whether no further entry should be put in: all places are taken, or what is kept of texts has grown past 16 MiB.</summary>
    public bool IsFull => Count == Capacity
        || (Count > 0 && (_sliceStarts[Count * SliceCount] > MaximumTextBytes || _rejectedStarts[Count] > MaximumTextBytes));

    /// <summary>Event time in microseconds since 1970-01-01T00:00:00Z.</summary>
    public long[] Times { get; }

    /// <summary>Hashed ids; with a revision, of the pair.</summary>
    public IdHash[] Ids { get; }

    /// <summary>Hashed ids as an outcome without a revision has them: the same as <see cref="Ids"/> where the charter has no revision.</summary>
    public IdHash[] CaseIds { get; }

    /// <summary>Decisions.</summary>
    public DecisionCode[] Decisions { get; }

    /// <summary>Outcomes.</summary>
    public OutcomeCode[] Outcomes { get; }

    /// <summary>Scores in units of <see cref="ScoreUnit"/>, or <see cref="MissingScore"/>, <see cref="UnlistedScore"/>.</summary>
    public long[] Scores { get; }

    /// <summary>Reasons for rejection.</summary>
    public RejectReason[] Rejected { get; }

    /// <summary>Positions in the source, from 0: line or row number less one, header not counted.</summary>
    public long[] Positions { get; }

    /// <summary>Codes, <see cref="FieldCount"/> for each entry.</summary>
    public ushort[] Codes { get; }

    /// <summary>The codes of an entry.</summary>
    public Span<ushort> CodesOf(int entry) => Codes.AsSpan(entry * FieldCount, FieldCount);

    /// <summary>The UTF-8 bytes of an entry's slice value; empty where missing.</summary>
    public ReadOnlySpan<byte> SliceOf(int entry, int slice)
    {
        int at = (entry * SliceCount) + slice;
        return _sliceBytes.AsSpan(_sliceStarts[at], _sliceStarts[at + 1] - _sliceStarts[at]);
    }

    /// <summary>Forgets all entries.</summary>
    public void Clear()
    {
        Count = 0;
    }

    /// <summary>The bytes of a rejected record; empty where they are not kept, or were never held (a record too long).</summary>
    public ReadOnlySpan<byte> RejectedBytesOf(int entry) =>
        _rejectedBytes.AsSpan(_rejectedStarts[entry], _rejectedStarts[entry + 1] - _rejectedStarts[entry]);

    /// <summary>Ends an entry as a rejection.</summary>
    /// <param name="reason">Why.</param>
    /// <param name="position">The record's position in its source.</param>
    /// <param name="bytes">The record's bytes, or none.</param>
    public void Reject(RejectReason reason, long position, ReadOnlySpan<byte> bytes = default)
    {
        int start = Count == 0 ? 0 : _rejectedStarts[Count];
        int end = start + (_keepsRejected ? bytes.Length : 0);
        if (end > _rejectedBytes.Length)
        {
            Array.Resize(ref _rejectedBytes, Math.Max(end, _rejectedBytes.Length * 2));
        }

        bytes[..(end - start)].CopyTo(_rejectedBytes.AsSpan(start));
        _rejectedStarts[Count + 1] = end;
        for (int slice = 0; slice < SliceCount; slice++)
        {
            SetSlice(slice, default);
        }

        Rejected[Count] = reason;
        Positions[Count] = position;
        Count++;
    }

    /// <summary>Ends an entry as a record; its columns and slice values (all, in order) have been set at index <see cref="Count"/>.</summary>
    public void Accept(long position)
    {
        _rejectedStarts[Count + 1] = Count == 0 ? 0 : _rejectedStarts[Count];
        Rejected[Count] = RejectReason.None;
        Positions[Count] = position;
        Count++;
    }

    /// <summary>Sets a slice value of the entry at index <see cref="Count"/>; slices are set in order.</summary>
    public void SetSlice(int slice, ReadOnlySpan<byte> utf8)
    {
        int at = (Count * SliceCount) + slice;
        int start = at == 0 ? 0 : _sliceStarts[at];
        int end = start + utf8.Length;
        if (end > _sliceBytes.Length)
        {
            Array.Resize(ref _sliceBytes, Math.Max(end, _sliceBytes.Length * 2));
        }

        utf8.CopyTo(_sliceBytes.AsSpan(start));
        _sliceStarts[at] = start;
        _sliceStarts[at + 1] = end;
    }
}
