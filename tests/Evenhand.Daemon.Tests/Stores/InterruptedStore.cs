using Evenhand.Daemon.Stores;
using Evenhand.Monitoring.Snapshots;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Daemon.Tests.Stores;

/// <summary>A store whose process stops after some commits: the next one never arrives.</summary>
internal sealed class InterruptedStore(IStore store, int commits) : IStore
{
    private int _left = commits;

    public StoredRun OpenRun(string identity, string charter) => store.OpenRun(identity, charter);

    public void Commit(StoredRun run, ShardCommit commit, IReadOnlyList<RunLogEntry>? log = null)
    {
        if (_left-- == 0)
        {
            throw new StoreException("stopped here");
        }

        store.Commit(run, commit, log);
    }

    public SealedSnapshot Finish(StoredRun run, Func<long, string, SealedSnapshot> seal) => store.Finish(run, seal);

    public ChainHead Head() => store.Head();

    public IReadOnlyList<SnapshotEntry> Snapshots() => store.Snapshots();

    public byte[]? Snapshot(long sequence) => store.Snapshot(sequence);

    public IReadOnlyList<string> MissingGuards() => store.MissingGuards();

    public IReadOnlyList<RunEntry> Runs() => store.Runs();

    public IReadOnlyList<RunLogEntry> RunLog(string identity) => store.RunLog(identity);

    public IReadOnlyDictionary<string, long> RefusedByReason(string identity) => store.RefusedByReason(identity);

    public void Dispose() => store.Dispose();
}
