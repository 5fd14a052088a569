using Evenhand.Monitoring.Snapshots;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Daemon.Stores;

/// <summary>A run as the store holds it: what a shard loads to go on with it, or the snapshot it ended in.</summary>
internal sealed class StoredRun
{
    /// <summary>The run's number in the store.</summary>
    public required long Number { get; init; }

    /// <summary>SHA-256 over all that makes the run.</summary>
    public required string Identity { get; init; }

    /// <summary>The charter's id.</summary>
    public required string Charter { get; init; }

    /// <summary>Counts the openings of the run: a commit under an older number is refused.</summary>
    public required long Epoch { get; init; }

    /// <summary>The 16-byte key that hashes this run's ids; empty where the run is finished.</summary>
    public required byte[] IdKey { get; init; }

    /// <summary>The snapshot; null while the run is unfinished.</summary>
    public SealedSnapshot? Snapshot { get; init; }

    /// <summary>The shard's header at the last commit; null before the first.</summary>
    public ShardHeader? Header { get; init; }

    /// <summary>The shard's buckets at the last commit.</summary>
    public IReadOnlyList<StoredBucket> Buckets { get; init; } = [];

    /// <summary>The remembered ids in order: how many came before, and the packed ids.</summary>
    public IReadOnlyList<(long First, byte[] Ids)> Ids { get; init; } = [];

    /// <summary>Bits of the outcomes whose decision has been seen; null without an outcomes file.</summary>
    public byte[]? FoundOutcomes { get; init; }

    /// <summary>The stored offsets as text; the next commit is taken only if they still stand in the store.</summary>
    internal required string ExpectedOffsets { get; set; }

    /// <summary>Records read up to the last commit.</summary>
    internal long Position { get; set; }

    /// <summary>Whether a commit failed, so that the next one would leave a gap.</summary>
    internal bool IsBroken { get; set; }
}
