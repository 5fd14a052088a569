using Evenhand.Monitoring.Charters;

namespace Evenhand.Monitoring.Records;

/// <summary>Turns the values found in a record into an entry of a batch: the part that JSON records and rows share.</summary>
internal sealed class RecordEncoder
{
    private readonly RecordPlaces _places;
    private readonly int[] _order;
    private readonly IdHasher _hasher;
    private readonly RecordKind _kind;
    private readonly TimeUnit _unit;
    private readonly FieldCoder[] _coders;

    // The slot of a coded field that stands at one place alone, as nearly all do; −1 for others. Null needs no search there.
    private readonly int[] _onlySlots;
    private readonly bool _isOfCases;
    private readonly ScoreField? _score;
    private readonly TextTable _decisions = new();
    private readonly TextTable _outcomes = new();

    public RecordEncoder(Charter charter, RecordLayout layout, IdHasher hasher, RecordKind kind)
    {
        ArgumentNullException.ThrowIfNull(charter);
        ArgumentNullException.ThrowIfNull(layout);
        ArgumentNullException.ThrowIfNull(hasher);
        if (kind == RecordKind.Outcome && (charter.RecordId is null || charter.Outcome is null))
        {
            throw new ArgumentException("Outcomes are joined by id: the charter needs `id` and `outcome`.", nameof(charter));
        }

        _places = new RecordPlaces(charter, layout, kind);
        _order = _places.Order;
        _hasher = hasher;
        _kind = kind;
        _unit = charter.Time?.Unit ?? TimeUnit.Rfc3339;
        _coders = [.. layout.Fields.Select((field, i) => new FieldCoder(field, layout.Numbers, i))];
        _onlySlots = [.. _places.Fields.Select(range => range.Count == 1 ? _order[range.From] : -1)];
        _isOfCases = kind == RecordKind.Label && charter.Revision is not null;
        _score = charter.Score;
        Fill(_decisions, charter.Decision?.Favourable, (int)DecisionCode.Favourable);
        Fill(_decisions, charter.Decision?.Unfavourable, (int)DecisionCode.Unfavourable);
        Fill(_decisions, charter.Decision?.Other, (int)DecisionCode.Other);
        Fill(_outcomes, charter.Outcome?.Positive, (int)OutcomeCode.Positive);
        Fill(_outcomes, charter.Outcome?.Negative, (int)OutcomeCode.Negative);
    }

    /// <summary>Where the values stand.</summary>
    public RecordPlaces Places => _places;

    /// <summary>The time of records of a charter without <c>time</c>.</summary>
    public long DefaultTime { get; set; }

    /// <summary>Encodes the record into the batch's next entry, without ending that entry.</summary>
    /// <param name="bytes">What the values are stretches of.</param>
    /// <param name="values">The value of each slot; none is <see cref="ValueKind.EscapedText"/>.</param>
    /// <param name="batch">Not full.</param>
    /// <returns>Why the record cannot be used; <see cref="RejectReason.None"/> where it can.</returns>
    public RejectReason Encode(ReadOnlySpan<byte> bytes, ReadOnlySpan<RecordValue> values, RecordBatch batch)
    {
        RejectReason reason = EncodeId(bytes, values, batch);
        reason = reason == RejectReason.None ? EncodeTime(bytes, values, batch) : reason;
        if (reason != RejectReason.None)
        {
            return reason;
        }

        return _kind switch
        {
            RecordKind.Outcome => EncodeOutcomeRecord(bytes, values, batch),
            RecordKind.Label => EncodeLabelRecord(bytes, values, batch),
            _ => EncodeDecisionRecord(bytes, values, batch),
        };
    }

    private static void Fill(TextTable table, IReadOnlyList<string>? texts, int code)
    {
        foreach (string text in texts ?? [])
        {
            table.Add(text, code);
        }
    }

    private RejectReason EncodeDecisionRecord(ReadOnlySpan<byte> bytes, ReadOnlySpan<RecordValue> values, RecordBatch batch)
    {
        RejectReason reason = EncodeDecision(bytes, values, batch);
        if (reason != RejectReason.None)
        {
            return reason;
        }

        batch.Outcomes[batch.Count] = OutcomeOf(bytes, Find(values, _places.Outcome));
        batch.Scores[batch.Count] = ScoreOf(bytes, Find(values, _places.Score));
        EncodeFields(bytes, values, batch.CodesOf(batch.Count));
        for (int slice = 0; slice < _places.Slices.Length; slice++)
        {
            RecordValue value = Find(values, _places.Slices[slice]);
            batch.SetSlice(slice, value.IsPresent && value.Kind != ValueKind.Container ? value.Of(bytes) : default);
        }

        return RejectReason.None;
    }

    private RejectReason EncodeOutcomeRecord(ReadOnlySpan<byte> bytes, ReadOnlySpan<RecordValue> values, RecordBatch batch)
    {
        RecordValue value = Find(values, _places.Outcome);
        if (!value.IsPresent || (value.Length == 0 && value.Kind != ValueKind.Container))
        {
            return RejectReason.MissingOutcome;
        }

        OutcomeCode outcome = OutcomeOf(bytes, value);
        SetNoDecision(batch, outcome);
        Span<ushort> codes = batch.CodesOf(batch.Count);
        for (int field = 0; field < codes.Length; field++)
        {
            codes[field] = _coders[field].Missing;
        }

        return outcome == OutcomeCode.Unknown ? RejectReason.UnknownOutcome : RejectReason.None;
    }

    private RejectReason EncodeLabelRecord(ReadOnlySpan<byte> bytes, ReadOnlySpan<RecordValue> values, RecordBatch batch)
    {
        SetNoDecision(batch, OutcomeCode.Unknown);
        EncodeFields(bytes, values, batch.CodesOf(batch.Count));
        return RejectReason.None;
    }

    private static void SetNoDecision(RecordBatch batch, OutcomeCode outcome)
    {
        batch.Outcomes[batch.Count] = outcome;
        batch.Decisions[batch.Count] = DecisionCode.Other;
        batch.Scores[batch.Count] = RecordBatch.MissingScore;
        for (int slice = 0; slice < batch.SliceCount; slice++)
        {
            batch.SetSlice(slice, default);
        }
    }

    private RejectReason EncodeId(ReadOnlySpan<byte> bytes, ReadOnlySpan<RecordValue> values, RecordBatch batch)
    {
        if (_places.Id.Count == 0)
        {
            batch.Ids[batch.Count] = default;
            return RejectReason.None;
        }

        RecordValue id = Find(values, _places.Id);
        if (id.Kind >= ValueKind.Literal)
        {
            return RejectReason.BadId;
        }

        if (!id.IsPresent || id.Length == 0)
        {
            return RejectReason.MissingId;
        }

        if (_places.Revision.Count == 0)
        {
            // A label names no revision: it is kept under what decisions of a charter with revisions have in common.
            batch.Ids[batch.Count] = batch.CaseIds[batch.Count] = _isOfCases ? _hasher.Hash(id.Of(bytes), default) : _hasher.Hash(id.Of(bytes));
            return RejectReason.None;
        }

        RecordValue revision = Find(values, _places.Revision);
        if (revision.Kind >= ValueKind.Literal)
        {
            return RejectReason.BadId;
        }

        batch.Ids[batch.Count] = _hasher.Hash(id.Of(bytes), revision.Of(bytes));
        batch.CaseIds[batch.Count] = _hasher.Hash(id.Of(bytes), default);
        return RejectReason.None;
    }

    private RejectReason EncodeTime(ReadOnlySpan<byte> bytes, ReadOnlySpan<RecordValue> values, RecordBatch batch)
    {
        ref long time = ref batch.Times[batch.Count];
        RecordValue value = Find(values, _places.Time);
        if (value.Kind == ValueKind.Container)
        {
            return RejectReason.BadTime;
        }

        if (value.IsPresent && value.Length > 0)
        {
            return TimeParser.TryParse(value.Of(bytes), _unit, out time) && EventTimeRange.Contains(time) ? RejectReason.None : RejectReason.BadTime;
        }

        if (_kind != RecordKind.Decision)
        {
            time = long.MinValue;
            return RejectReason.None;
        }

        time = DefaultTime;
        return _places.Time.Count == 0 ? RejectReason.None : RejectReason.MissingTime;
    }

    private RejectReason EncodeDecision(ReadOnlySpan<byte> bytes, ReadOnlySpan<RecordValue> values, RecordBatch batch)
    {
        ref DecisionCode decision = ref batch.Decisions[batch.Count];
        decision = DecisionCode.Other;
        if (_places.Decision.Count == 0)
        {
            return RejectReason.None;
        }

        RecordValue value = Find(values, _places.Decision);
        if (value.Kind == ValueKind.Container)
        {
            return RejectReason.UnknownDecision;
        }

        if (!value.IsPresent || value.Length == 0)
        {
            return RejectReason.MissingDecision;
        }

        int code = _decisions.Find(value.Of(bytes));
        if (code == TextTable.None)
        {
            return RejectReason.UnknownDecision;
        }

        decision = (DecisionCode)code;
        return RejectReason.None;
    }

    private OutcomeCode OutcomeOf(ReadOnlySpan<byte> bytes, RecordValue value)
    {
        if (!value.IsPresent || value.Kind == ValueKind.Container)
        {
            return OutcomeCode.Unknown;
        }

        int code = _outcomes.Find(value.Of(bytes));
        return code == TextTable.None ? OutcomeCode.Unknown : (OutcomeCode)code;
    }

    private long ScoreOf(ReadOnlySpan<byte> bytes, RecordValue value)
    {
        if (value.Kind == ValueKind.Container)
        {
            return RecordBatch.UnlistedScore;
        }

        if (_score is null || !value.IsPresent || value.Length == 0)
        {
            return RecordBatch.MissingScore;
        }

        if (!NumberParser.TryParse(value.Of(bytes), out double score) || !(score >= _score.Low && score <= _score.High))
        {
            return RecordBatch.UnlistedScore;
        }

        return (long)Math.Round((score - _score.Low) / (_score.High - _score.Low) * RecordBatch.ScoreUnit);
    }

    private void EncodeFields(ReadOnlySpan<byte> bytes, ReadOnlySpan<RecordValue> values, Span<ushort> codes)
    {
        unchecked
        {
            PlaceRange[] ranges = _places.Fields;
            int[] onlySlots = _onlySlots;
            FieldCoder[] coders = _coders;
            for (int field = 0; field < codes.Length; field++)
            {
                FieldCoder coder = coders[field];
                int only = onlySlots[field];
                RecordValue value = only >= 0 ? values[only] : Find(values, ranges[field]);
                codes[field] = value.Kind switch
                {
                    ValueKind.Absent or ValueKind.Null => coder.Missing,
                    ValueKind.Container => coder.Unlisted,
                    _ => coder.Code(value.Of(bytes)),
                };
            }
        }
    }

    /// <summary>The first present value among a field's places; default where there is none.</summary>
    private RecordValue Find(ReadOnlySpan<RecordValue> values, PlaceRange range)
    {
        unchecked
        {
            int[] order = _order;
            int end = range.From + range.Count;
            for (int i = range.From; i < end; i++)
            {
                RecordValue value = values[order[i]];
                if (value.IsPresent)
                {
                    return value;
                }
            }

            return default;
        }
    }
}
