using System.Text.Json.Nodes;
using Evenhand.Daemon.Hosting;
using Evenhand.Daemon.Sources;
using Evenhand.Monitoring.Alerts;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;
using Evenhand.Monitoring.Snapshots;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Daemon.Replay;

/// <summary>Reads the inputs of a replay in order into one shard and writes the snapshot at its as-of.</summary>
/// <remarks>One thread reads, decodes and adds; the store writes beside it. The result depends on the charter, the inputs, the as-of and the outcomes alone.</remarks>
internal sealed class ReplayRun
{
    private readonly Charter _charter;
    private readonly ReplayRequest _request;
    private readonly SumLayout _layout;
    private readonly IReplayProgress? _progress;
    private readonly TimeProvider _clock;
    private readonly string? _labelsPath;
    private Func<long, string> _placeOf = position => $":{position + 1}";
    private readonly List<string> _remarks = [];
    private readonly List<string> _hashes = [];
    private readonly Dictionary<string, RefusalSample> _refusals = [];

    public ReplayRun(Charter charter, ReplayRequest request, TimeProvider clock, IReplayProgress? progress)
    {
        _charter = charter;
        _request = request;
        _clock = clock;
        _progress = progress;
        _layout = new SumLayout(charter);
        _labelsPath = LabelsFile.PathOf(request.Charter, charter.LabelFeed?.File);
        if (charter.Circuit is not null || charter.Rules.Count > 0)
        {
            Remark("the charter's circuit and rule are checked but not used in this version: modelled readings and flip risk are absent");
        }
    }

    /// <summary>Replays without a store.</summary>
    public ReplayResult RunAlone()
    {
        IdHasher hasher = new(new byte[IdHasher.KeyLength]);
        OutcomesFile? outcomes = LoadOutcomes(hasher);
        LabelsFile? labels = LoadLabels(hasher);
        Shard shard = NewShard(outcomes, labels);
        ReadInputs(shard, hasher, knownHashes: null, journal: null);
        string identity = RunIdentity.Of(_charter.Sha256, _hashes, _request.AsOf, outcomes?.Sha256, labels?.Sha256);
        SealedSnapshot snapshot = Seal(shard, outcomes, labels, identity)(1, SnapshotSeal.Genesis);
        return new ReplayResult(snapshot, IsRepeated: false, Remarks());
    }

    /// <summary>Replays into a store: goes on with an unfinished run, repeats a finished one.</summary>
    public ReplayResult RunIn(Stores.IStore store)
    {
        List<string> hashes = [.. _request.Inputs.Select(RecordFile.HashOf)];
        string? outcomesHash = _request.Outcomes is null ? null : RecordFile.HashOf(_request.Outcomes);
        string? labelsHash = _labelsPath is null ? null : RecordFile.HashOf(_labelsPath);
        string identity = RunIdentity.Of(_charter.Sha256, hashes, _request.AsOf, outcomesHash, labelsHash);
        Stores.StoredRun run = store.OpenRun(identity, _charter.Id);
        if (run.Snapshot is not null)
        {
            return new ReplayResult(run.Snapshot, IsRepeated: true, ["this run was finished before: its snapshot is printed again, nothing was read or appended"]);
        }

        IdHasher hasher = new(run.IdKey);
        OutcomesFile? outcomes = LoadOutcomes(hasher);
        LabelsFile? labels = LoadLabels(hasher);
        Shard shard = NewShard(outcomes, labels);
        if (run.Header is not null)
        {
            shard.Load(run.Header, run.Buckets, run.Ids, run.FoundOutcomes);
            _remarks.Add($"an unfinished run goes on after {shard.Counts.Read:N0} records");
        }

        using RunJournal journal = new(store, run);
        ReadInputs(shard, hasher, hashes, journal);
        journal.Add(shard.Commit());
        SealedSnapshot snapshot = journal.Finish(Seal(shard, outcomes, labels, identity));
        return new ReplayResult(snapshot, IsRepeated: false, Remarks());
    }

    private OutcomesFile? LoadOutcomes(IdHasher hasher) =>
        _request.Outcomes is null ? null : OutcomesFile.Load(_request.Outcomes, _layout, hasher, Remark);

    private LabelsFile? LoadLabels(IdHasher hasher) =>
        _labelsPath is null ? null : LabelsFile.Load(_labelsPath, _layout, hasher, Remark);

    private void Remark(string remark) => _remarks.Add(remark);

    private Shard NewShard(OutcomesFile? outcomes, LabelsFile? labels) => new(
        _layout,
        _request.Inputs.Count,
        new ShardOptions
        {
            AsOf = _request.AsOf,
            Lateness = _charter.Lateness?.Microseconds,
            Ahead = _charter.Ahead?.Microseconds,
        },
        outcomes?.Index,
        labels?.Index);

    private void ReadInputs(Shard shard, IdHasher hasher, List<string>? knownHashes, RunJournal? journal)
    {
        RecordBatch batch = new(_layout.Records, _request.BatchSize, _charter.KeepRejected);
        CommitClock due = new(_clock, _request.CommitEvery);
        for (int input = 0; input < _request.Inputs.Count; input++)
        {
            using RecordFile file = RecordFile.Open(_request.Inputs[input], _charter, _layout.Records, hasher, RecordKind.Decision);
            _placeOf = file.PlaceOf;
            if (_request.AsOf is { } asOf)
            {
                file.DefaultTime = asOf - 1;
            }

            if (!shard.Ended[input])
            {
                file.Skip(shard.NextOffsets[input]);
                ReadInput(shard, file, input, batch, due, journal);
                CheckUnchanged(file, shard, knownHashes?[input]);
                shard.End(input);
            }

            _hashes.Add(knownHashes?[input] ?? file.Sha256);
            if (file.Warning is not null)
            {
                Remark(file.Warning);
            }
        }
    }

    private void ReadInput(Shard shard, RecordFile file, int input, RecordBatch batch, CommitClock due, RunJournal? journal)
    {
        bool more = true;
        while (more)
        {
            batch.Clear();
            more = file.Fill(batch);
            shard.Add(batch, input);
            _progress?.Report(input, file.Name, file.BytesRead, file.Length);
            if (journal is null)
            {
                NoteRefused(shard.TakeRefused());
            }
            else if (due.IsDue(batch.Count))
            {
                Commit(shard, journal);
            }
        }
    }

    private void Commit(Shard shard, RunJournal journal)
    {
        ShardCommit commit = shard.Commit();
        NoteRefused(commit.Refused);
        journal.Add(commit);
    }

    /// <summary>A run's identity holds the inputs' hashes, so a file that changes after hashing must not slip in.</summary>
    private static void CheckUnchanged(RecordFile file, Shard shard, string? expected)
    {
        if (expected is not null && file.Sha256 != expected)
        {
            throw new SourceException($"{file.Name}: changed while it was read; replay it again when nothing writes to it any more");
        }
    }

    private void NoteRefused(IReadOnlyList<RefusedEntry> refused)
    {
        foreach (RefusedEntry entry in refused)
        {
            if (!_refusals.TryGetValue(entry.Reason, out RefusalSample? sample))
            {
                string name = _request.Inputs[entry.Input] == "-" ? "stdin" : _request.Inputs[entry.Input];
                sample = new RefusalSample($"{name}{_placeOf(entry.Position)}");
                _refusals.Add(entry.Reason, sample);
            }

            sample.Count++;
        }
    }

    private List<string> Remarks() =>
    [
        .. _remarks,
        .. _refusals.OrderByDescending(r => r.Value.Count).Select(r => $"{r.Value.Count:N0} refused as {r.Key}, the first at {r.Value.First}"),
    ];

    private Func<long, string, SealedSnapshot> Seal(Shard shard, OutcomesFile? outcomes, LabelsFile? labels, string identity)
    {
        long asOf = AsOf(shard);
        TickResult tick = new Tick(_layout, [shard]).At(asOf, shard.Counts, withAll: true);
        SnapshotContent content = new()
        {
            Kind = "replay",
            Run = identity,
            ProgramVersion = ProgramVersion.Text,
            Layout = _layout,
            CreatedAt = asOf,
            Tick = tick,
            Counts = shard.Counts,
            Sources = [.. _request.Inputs.Select((path, i) => new SnapshotSource($"file:{NameOf(path)}", 0, shard.NextOffsets[i]))],
            Outcomes = outcomes?.CountsOf(shard.Counts),
            Labels = labels?.CountsOf(shard.Counts),
            EvictedIds = shard.EvictedIds,
        };
        JsonObject document = SnapshotBuilder.Build(content);
        return (sequence, previous) => SnapshotSeal.Seal(document, sequence, previous, _request.SigningKey);
    }

    private long AsOf(Shard shard)
    {
        if (_request.AsOf is { } asked)
        {
            return asked;
        }

        if (shard.Newest is not { } newest)
        {
            Remark("no record with a usable time: the as-of is 1970-01-01T00:00:00Z; give --as-of to state another");
            return 0;
        }

        return EventTime.Floor(newest, EventTime.Minute) + EventTime.Minute;
    }

    private static string NameOf(string path) => path == "-" ? "stdin" : Path.GetFileName(path);

    private sealed class RefusalSample(string first)
    {
        public string First { get; } = first;

        public long Count { get; set; }
    }
}
