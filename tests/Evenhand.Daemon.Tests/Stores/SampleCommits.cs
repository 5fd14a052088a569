using System.Text.Json.Nodes;
using Evenhand.Daemon.Stores;
using Evenhand.Monitoring.Snapshots;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Daemon.Tests.Stores;

/// <summary>Runs, commits and snapshots to fill a store with.</summary>
internal static class SampleCommits
{
    /// <summary>The charter's id of all runs here.</summary>
    public const string Charter = "flood-grants";

    /// <summary>Why the records here are refused.</summary>
    public const string Reason = "bad_time";

    /// <summary>The identity of a run, told apart by one hexadecimal digit.</summary>
    public static string Identity(char digit) => new(digit, 64);

    /// <summary>A commit after this many records, all of them used.</summary>
    public static ShardCommit At(long offset) => new(
        new ShardHeader { NextOffsets = [offset], Ended = [false], Slices = [], Counts = new ShardCounts { Read = offset, Used = offset } },
        [],
        [],
        0,
        [],
        0,
        [],
        null);

    /// <summary>A bucket of a day, holding these bytes.</summary>
    public static StoredBucket Day(long start, params byte[] packed) => new(new BucketKey(Tier.Day, start, 0), packed);

    /// <summary>Opens a run, commits a bucket, an id and a refused record, and finishes it.</summary>
    public static SealedSnapshot Finished(IStore store, string identity)
    {
        StoredRun run = store.OpenRun(identity, Charter);
        store.Commit(run, At(1) with { Dirty = [Day(0, 1)], NewIds = new byte[ShardCommit.IdBytes], Refused = [new RefusedEntry(0, 0, Reason)] });
        return store.Finish(run, Seal);
    }

    /// <summary>Seals a small snapshot.</summary>
    public static SealedSnapshot Seal(long sequence, string previous) => SnapshotSeal.Seal(
        new JsonObject
        {
            ["kind"] = "replay",
            ["charter"] = new JsonObject { ["id"] = Charter },
            ["as_of"] = "2031-03-01T00:00:00Z",
            ["created_at"] = "2031-03-02T00:00:00Z",
            ["state"] = new JsonObject { ["n"] = sequence },
        },
        sequence,
        previous);
}
