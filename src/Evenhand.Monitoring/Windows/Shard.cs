using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;

namespace Evenhand.Monitoring.Windows;

/// <summary>The state of one partition of one charter's stream: a bag of sums, and what tells records apart.</summary>
/// <remarks>
/// <para>The state is a function of the records in order (and of the run log): batch sizes, commits and crashes change no bit.</para>
/// <para>The way of a record: (1) read and, if need be, rejected; (2) excluded when at or after the as-of; (3) late or ahead of the
/// shard's clock; (4) a duplicate; (5) its missing labels and (6) its outcome looked up; (7) added to its minute, quarter-hour, day and to all,
/// for all slices together and for its own. Not thread-safe.</para>
/// </remarks>
public sealed class Shard
{
    private const int WarmLength = 64;

    private readonly SumLayout _layout;
    private readonly ShardOptions _options;
    private readonly OutcomeIndex? _outcomes;
    private readonly LabelIndex? _labels;
    private readonly Retention _retention;
    private readonly LocalDays _days;
    private readonly BucketTable _buckets;
    private readonly RecentIds? _ids;
    private readonly SliceTable _slices;
    private readonly RecordSums _sums;
    private readonly long[] _nextOffsets;
    private readonly bool[] _ended;
    private readonly long _within;
    private readonly long _keptByAll;
    private ShardCounts _counts = new();
    private List<RefusedEntry> _refused = [];
    private List<BucketKey> _dropped = [];
    private long _newest = long.MinValue;
    private long _oldest = long.MaxValue;
    private long _prunedAt = long.MinValue;
    private long _minute;
    private long _quarter;

    /// <summary>An empty shard.</summary>
    /// <param name="layout">The charter's sums.</param>
    /// <param name="inputs">Number of inputs, at least 1.</param>
    /// <param name="options">How time is judged.</param>
    /// <param name="outcomes">Outcomes that come apart from their records; null where records carry their own.</param>
    /// <param name="labels">Group labels that come apart from their records; null without a feed.</param>
    public Shard(SumLayout layout, int inputs, ShardOptions options, OutcomeIndex? outcomes = null, LabelIndex? labels = null)
    {
        ArgumentNullException.ThrowIfNull(layout);
        ArgumentNullException.ThrowIfNull(options);
        Charter charter = layout.Charter;
        _layout = layout;
        _options = options;
        _outcomes = outcomes;
        _labels = labels;
        _retention = new Retention(charter.Keep);
        _keptByAll = _retention.ByAllTiers;
        _days = new LocalDays(charter.TimeZone);
        _buckets = new BucketTable(layout.Length, _retention);
        _ids = charter.RecordId is null ? null : new RecentIds(charter.Deduplicate.Microseconds);
        _slices = new SliceTable(charter.Slices);
        _sums = new RecordSums(layout);
        _nextOffsets = new long[inputs];
        _ended = new bool[inputs];
        _within = charter.Outcome?.Within.Microseconds ?? 0;
    }

    /// <summary>What became of the records so far.</summary>
    public ShardCounts Counts => _counts;

    /// <summary>The newest event time used; null before the first.</summary>
    public long? Newest => _newest == long.MinValue ? null : _newest;

    /// <summary>The oldest event time used; null before the first.</summary>
    public long? Oldest => _oldest == long.MaxValue ? null : _oldest;

    /// <summary>Which slice values have sums of their own.</summary>
    public SliceTable Slices => _slices;

    /// <summary>Ids forgotten for want of room.</summary>
    public long EvictedIds => _ids?.Evicted ?? 0;

    /// <summary>Entries taken from each input so far.</summary>
    public IReadOnlyList<long> NextOffsets => _nextOffsets;

    /// <summary>Whether each input has been read to its end.</summary>
    public IReadOnlyList<bool> Ended => _ended;

    /// <summary>Takes the records refused since the last commit, where no store keeps track of them.</summary>
    public IReadOnlyList<RefusedEntry> TakeRefused()
    {
        List<RefusedEntry> refused = _refused;
        _refused = [];
        return refused;
    }

    /// <summary>Takes a batch of one input, in order.</summary>
    public void Add(RecordBatch batch, int input)
    {
        ArgumentNullException.ThrowIfNull(batch);
        for (int i = 0; i < batch.Count; i++)
        {
            if (i % WarmLength == 0)
            {
                _ids?.Warm(batch.Ids.AsSpan(i, Math.Min(WarmLength, batch.Count - i)));
            }

            _counts.Read++;
            AddEntry(batch, i, input);
            _nextOffsets[input] = batch.Positions[i] + 1;
        }

        // Once an hour of event time, so that a long file does not pile up minutes.
        if (_newest != long.MinValue && (_prunedAt == long.MinValue || _newest - _prunedAt >= EventTime.Hour))
        {
            Prune();
        }
    }

    /// <summary>Notes that an input has been read to its end.</summary>
    public void End(int input) => _ended[input] = true;

    /// <summary>Everything that changed since the last commit, for the store.</summary>
    public ShardCommit Commit()
    {
        if (_newest != long.MinValue)
        {
            Prune();
        }

        long forgotten = _ids is null ? 0 : Math.Max(0, _ids.Added - RecentIds.Capacity);
        byte[] newIds = _ids?.TakeNew() ?? [];
        long added = _ids?.Added ?? 0;
        ShardCommit commit = new(
            Header(),
            _buckets.TakeDirty(),
            _dropped,
            added - (newIds.Length / RecentIds.EntryBytes),
            newIds,
            forgotten,
            _refused,
            _outcomes is null ? null : [.. _outcomes.Found]);
        _refused = [];
        _dropped = [];
        return commit;
    }

    /// <summary>Takes the state back from the store; the shard must be empty.</summary>
    public void Load(ShardHeader header, IEnumerable<StoredBucket> buckets, IEnumerable<(long First, byte[] Ids)> ids, byte[]? foundOutcomes)
    {
        ArgumentNullException.ThrowIfNull(header);
        ArgumentNullException.ThrowIfNull(buckets);
        ArgumentNullException.ThrowIfNull(ids);
        if (header.NextOffsets.Count != _nextOffsets.Length)
        {
            throw new StoredStateException("the stored run has another number of inputs");
        }

        header.NextOffsets.ToArray().CopyTo(_nextOffsets, 0);
        header.Ended.ToArray().CopyTo(_ended, 0);
        _counts = header.Counts;
        _newest = header.Newest ?? long.MinValue;
        _oldest = header.Oldest ?? long.MaxValue;
        _slices.Load(header.Slices);
        foreach (StoredBucket bucket in buckets)
        {
            _buckets.Load(bucket.Key, bucket.Packed);
        }

        foreach ((long first, byte[] chunk) in ids)
        {
            _ids?.Load(first, chunk);
        }

        if (foundOutcomes is not null)
        {
            _outcomes?.LoadFound(foundOutcomes);
        }
    }

    /// <summary>Adds the sums of a window to others, bucket by bucket.</summary>
    /// <param name="span">The window.</param>
    /// <param name="slice">0 for all slices together.</param>
    /// <param name="into">Sums of the layout's length.</param>
    public void AddWindow(WindowSpan span, int slice, Span<long> into)
    {
        ArgumentNullException.ThrowIfNull(span);
        foreach (SumBucket bucket in _buckets.Buckets)
        {
            if (bucket.Key.Slice == slice && span.Takes(bucket.Key.Tier, bucket.Key.Start))
            {
                bucket.AddTo(into);
            }
        }
    }

    /// <summary>The numbers of the slices that have any sums, in order; 0 is not among them.</summary>
    public IReadOnlyList<int> SliceNumbers() =>
        [.. _buckets.Buckets.Where(b => b.Key.Slice != 0 && b.Key.Tier == Tier.All).Select(b => b.Key.Slice).Order()];

    private void AddEntry(RecordBatch batch, int i, int input)
    {
        // 1. Rejected by the decoder.
        if (batch.Rejected[i] != RejectReason.None)
        {
            _counts.Rejected++;
            _counts.ByReason[(int)batch.Rejected[i]]++;
            byte[]? bytes = _layout.Charter.KeepRejected ? batch.RejectedBytesOf(i).ToArray() : null;
            _refused.Add(new RefusedEntry(input, batch.Positions[i], batch.Rejected[i].Name(), bytes));
            return;
        }

        // 2. and 3. Outside the time that is looked at.
        long time = batch.Times[i];
        if (IsOutsideTime(time, batch.Positions[i], input))
        {
            return;
        }

        // 4. Seen before.
        if (_ids is not null && !_ids.Add(batch.Ids[i], time))
        {
            _counts.Duplicate++;
            return;
        }

        Count(batch, i, time);
    }

    private bool IsOutsideTime(long time, long position, int input)
    {
        if (time >= _options.AsOf)
        {
            _counts.Excluded++;
            return true;
        }

        if (_newest == long.MinValue)
        {
            return false;
        }

        if (time < _newest - _options.Lateness)
        {
            _counts.Late++;
            _refused.Add(new RefusedEntry(input, position, "late"));
            return true;
        }

        if (time > _newest + _options.Ahead)
        {
            _counts.Ahead++;
            _refused.Add(new RefusedEntry(input, position, "ahead"));
            return true;
        }

        return false;
    }

    private void Count(RecordBatch batch, int i, long time)
    {
        _newest = Math.Max(_newest, time);
        _oldest = Math.Min(_oldest, time);
        if (_labels is not null)
        {
            // 5. Labels that the record lacks.
            LabelMatch match = _labels.Fill(batch.CaseIds[i], time, _options.AsOf ?? long.MaxValue, batch.CodesOf(i));
            _counts.LabelsFilled += match == LabelMatch.Filled ? 1 : 0;
            _counts.LabelsLate += match == LabelMatch.Late ? 1 : 0;
        }

        OutcomeCode outcome = batch.Outcomes[i];
        if (batch.Decisions[i] == DecisionCode.Other)
        {
            _counts.Other++;
        }
        else
        {
            _counts.Used++;

            // 6. The record's own outcome wins over the file's.
            if (_outcomes is not null && outcome == OutcomeCode.Unknown)
            {
                // One that names its revision counts for that alone, one that names none for every revision.
                outcome = OutcomeOf(_outcomes.Has(batch.Ids[i]) ? batch.Ids[i] : batch.CaseIds[i], time);
            }
        }

        // 7. The sums.
        _sums.Set(batch, i, outcome);
        AddTo(time, 0);
        for (int s = 0; s < batch.SliceCount; s++)
        {
            AddTo(time, _slices.NumberOf(s, batch.SliceOf(i, s)));
        }
    }

    private OutcomeCode OutcomeOf(IdHash id, long time)
    {
        OutcomeMatch match = _outcomes!.Find(id, time, _within, _options.AsOf ?? long.MaxValue, out OutcomeCode outcome, out bool isFirst);
        if (isFirst)
        {
            // A later decision of the same id takes the outcome too, but an outcome is counted once.
            _counts.OutcomesMatched += match == OutcomeMatch.Counts ? 1 : 0;
            _counts.OutcomesOutside += match == OutcomeMatch.Outside ? 1 : 0;
        }

        return outcome;
    }

    private void AddTo(long time, int slice)
    {
        long anchor = _options.AsOf ?? _newest;
        if (time >= anchor - _keptByAll)
        {
            AddToAll(time, slice);
            return;
        }

        AddTo(new BucketKey(Tier.Minute, EventTime.Floor(time, EventTime.Minute), slice), anchor);
        AddTo(new BucketKey(Tier.QuarterHour, EventTime.Floor(time, EventTime.QuarterHour), slice), anchor);
        AddTo(new BucketKey(Tier.Day, _days.DayOf(time).Start, slice), anchor);
        AddTo(new BucketKey(Tier.All, 0, slice), anchor);
    }

    /// <summary>The common case: a record so new that every tier keeps it.</summary>
    private void AddToAll(long time, int slice)
    {
        if (time < _minute || time >= _minute + EventTime.Minute)
        {
            // Neighbouring records mostly share their minute: two divisions saved.
            _minute = EventTime.Floor(time, EventTime.Minute);
            _quarter = EventTime.Floor(time, EventTime.QuarterHour);
        }

        _sums.AddTo(_buckets.Open(new BucketKey(Tier.Minute, _minute, slice)));
        _sums.AddTo(_buckets.Open(new BucketKey(Tier.QuarterHour, _quarter, slice)));
        _sums.AddTo(_buckets.Open(new BucketKey(Tier.Day, _days.DayOf(time).Start, slice)));
        _sums.AddTo(_buckets.Open(new BucketKey(Tier.All, 0, slice)));
    }

    private void AddTo(BucketKey key, long anchor)
    {
        if (key.Tier == Tier.All || key.Start >= _retention.Earliest(key.Tier, anchor))
        {
            _sums.AddTo(_buckets.Open(key));
        }
    }

    private void Prune()
    {
        _dropped.AddRange(_buckets.Prune(_options.AsOf ?? _newest));
        _prunedAt = _newest;
    }

    private ShardHeader Header() => new()
    {
        NextOffsets = [.. _nextOffsets],
        Ended = [.. _ended],
        Newest = Newest,
        Oldest = Oldest,
        Slices = _slices.Values,
        Counts = new ShardCounts
        {
            Read = _counts.Read,
            Used = _counts.Used,
            Other = _counts.Other,
            Rejected = _counts.Rejected,
            Late = _counts.Late,
            Ahead = _counts.Ahead,
            Duplicate = _counts.Duplicate,
            Held = _counts.Held,
            Excluded = _counts.Excluded,
            ByReason = [.. _counts.ByReason],
            OutcomesMatched = _counts.OutcomesMatched,
            OutcomesOutside = _counts.OutcomesOutside,
            LabelsFilled = _counts.LabelsFilled,
            LabelsLate = _counts.LabelsLate,
        },
    };
}
