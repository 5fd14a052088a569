using System.Threading.Channels;
using Evenhand.Daemon.Stores;
using Evenhand.Monitoring.Snapshots;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Daemon.Replay;

/// <summary>Stores a run's commits beside the reading, in order; at most a few wait.</summary>
/// <remarks>
/// Reading never waits for the store unless the queue is full. A commit that fails stops the run at the next call: what was
/// committed before it stays, and the run goes on from there another time.
/// </remarks>
internal sealed class RunJournal : IDisposable
{
    private const int QueueLength = 2;

    private readonly IStore _store;
    private readonly StoredRun _run;
    private readonly Channel<ShardCommit> _queue =
        Channel.CreateBounded<ShardCommit>(new BoundedChannelOptions(QueueLength) { SingleReader = true, SingleWriter = true });

    private readonly Task _writer;

    /// <summary>Journals a run.</summary>
    public RunJournal(IStore store, StoredRun run)
    {
        _store = store;
        _run = run;
        _writer = Task.Run(WriteAsync);
    }

    /// <summary>Hands a commit over; waits while the queue is full.</summary>
    /// <exception cref="StoreException">A commit before this one failed.</exception>
    public void Add(ShardCommit commit)
    {
        try
        {
            if (!_queue.Writer.TryWrite(commit))
            {
                _queue.Writer.WriteAsync(commit).AsTask().GetAwaiter().GetResult();
            }
        }
        catch (ChannelClosedException)
        {
            // The writer closed the queue because the store failed; it says how.
            _writer.GetAwaiter().GetResult();
            throw;
        }
    }

    /// <summary>Waits until everything is stored, then appends the snapshot and finishes the run.</summary>
    public SealedSnapshot Finish(Func<long, string, SealedSnapshot> seal)
    {
        _queue.Writer.TryComplete();
        _writer.GetAwaiter().GetResult();
        return _store.Finish(_run, seal);
    }

    /// <inheritdoc/>
    public void Dispose()
    {
        _queue.Writer.TryComplete();
        _writer.ContinueWith(static _ => { }, TaskScheduler.Default).Wait();
    }

    private async Task WriteAsync()
    {
        try
        {
            await foreach (ShardCommit commit in _queue.Reader.ReadAllAsync().ConfigureAwait(false))
            {
                _store.Commit(_run, commit);
            }
        }
        catch (Exception e)
        {
            // The reader learns of it at its next commit, or at the end.
            _queue.Writer.TryComplete(e);
            throw;
        }
    }
}
