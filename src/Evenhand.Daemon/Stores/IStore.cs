using Evenhand.Monitoring.Snapshots;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Daemon.Stores;

/// <summary>A store held for writing. There is one writer at a time.</summary>
/// <remarks>
/// Whatever a call writes, it writes in one transaction: after a crash all of it is there or none. May be used from several
/// threads, one after the other. Every member throws <see cref="StoreException"/> where the store fails.
/// </remarks>
internal interface IStore : IEvidenceStore
{
    /// <summary>Opens a run by its identity: a new one, an unfinished one to go on with, or a finished one.</summary>
    /// <param name="identity">SHA-256 over all that makes the run, 64 lower-case hexadecimal digits.</param>
    /// <param name="charter">The charter's id.</param>
    /// <returns>The run. An unfinished run belongs to the last caller: whoever opened it before can commit no more.</returns>
    /// <exception cref="Evenhand.Monitoring.Windows.StoredStateException">The stored run is damaged.</exception>
    StoredRun OpenRun(string identity, string charter);

    /// <summary>Stores what changed in a run since its last commit.</summary>
    /// <param name="run">An unfinished run.</param>
    /// <param name="commit">What changed. Commits are stored in the order in which the shard gave them.</param>
    /// <param name="log">Decisions to be noted in the run's log that did not come from a record.</param>
    /// <remarks>A run whose commit failed takes no further ones, for they would lack what was lost: open it again.</remarks>
    void Commit(StoredRun run, ShardCommit commit, IReadOnlyList<RunLogEntry>? log = null);

    /// <summary>Appends a run's snapshot to the chain and finishes the run; its buckets, ids and outcomes go, its log and refusals stay.</summary>
    /// <param name="run">An unfinished run with everything committed.</param>
    /// <param name="seal">Seals the snapshot at the sequence and with the previous hash that it is given.</param>
    /// <returns>The snapshot as stored.</returns>
    SealedSnapshot Finish(StoredRun run, Func<long, string, SealedSnapshot> seal);
}
