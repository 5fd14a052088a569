namespace Evenhand.Daemon.Stores;

/// <summary>The side of a store that only reads: the chain of snapshots, and what runs left beside it.</summary>
/// <remarks>Not thread-safe. Every member throws <see cref="StoreException"/> where the store fails.</remarks>
internal interface IEvidenceStore : IDisposable
{
    /// <summary>The last snapshot of the chain.</summary>
    ChainHead Head();

    /// <summary>The snapshots by sequence, without their documents.</summary>
    IReadOnlyList<SnapshotEntry> Snapshots();

    /// <summary>A stored document, byte for byte; null where there is none of this sequence.</summary>
    byte[]? Snapshot(long sequence);

    /// <summary>What stands in the store's design to keep the chain append-only and is gone; empty where all is in place.</summary>
    IReadOnlyList<string> MissingGuards();

    /// <summary>The runs in the order in which they were first opened.</summary>
    IReadOnlyList<RunEntry> Runs();

    /// <summary>The log of a run in order; empty where there is no such run.</summary>
    IReadOnlyList<RunLogEntry> RunLog(string identity);

    /// <summary>How many records a run refused, by reason; empty where there is no such run.</summary>
    IReadOnlyDictionary<string, long> RefusedByReason(string identity);
}
