using System.Text;
using Dapper;
using Evenhand.Daemon.Replay;
using Evenhand.Daemon.Stores;
using Evenhand.Daemon.Stores.Sqlite;
using Evenhand.Daemon.Tests.Processes;
using Evenhand.Monitoring.Windows;
using static Evenhand.Daemon.Tests.Stores.SampleCommits;

namespace Evenhand.Daemon.Tests.Stores;

/// <summary>What becomes of a SQLite store when the disk, the file or its bytes fail: one clear line, and nothing half-written.</summary>
public sealed class SqliteFaultTests : IDisposable
{
    private readonly SqlitePlace _place = new();

    public void Dispose() => _place.Dispose();

    [Fact]
    public void Commit_WithTheDiskFull_StoresNothingUntilThereIsRoom()
    {
        using SqliteStore store = SqliteStore.Open(_place.DatabaseFile);
        StoredRun run = store.OpenRun(Identity('a'), Charter);
        store.Commit(run, At(1) with { Dirty = [Day(1, 1)] });
        LimitPages(store, more: 4);

        ShardCommit large = At(2) with { Dirty = [Day(1, 2), Day(2, new byte[100_000])], Refused = [new RefusedEntry(0, 1, Reason)] };
        StoreException e = Assert.Throws<StoreException>(() => store.Commit(run, large));

        Assert.Contains("no room left", e.Message, StringComparison.Ordinal);
        Assert.DoesNotContain('\n', e.Message);
        Assert.True(e.CanRetry);
        StoredRun stored = store.OpenRun(Identity('a'), Charter);
        Assert.Equal(1, stored.Header!.NextOffsets[0]);
        Assert.Equal([1], Assert.Single(stored.Buckets).Packed);
        Assert.Empty(store.RefusedByReason(Identity('a')));

        LimitPages(store, more: 1000);
        store.Commit(stored, large);
        Assert.Equal(2, store.OpenRun(Identity('a'), Charter).Buckets.Count);
    }

    [Theory]
    [InlineData(0)]
    [InlineData(8)]
    [InlineData(40)]
    public void Replay_WithTheDiskFull_GoesOnWhereItStoppedWhenThereIsRoom(int pages)
    {
        using StoredReplay replay = new();
        using SqliteStore store = SqliteStore.Open(_place.DatabaseFile);
        LimitPages(store, pages);

        StoreException e = Assert.Throws<StoreException>(() => replay.Into(store));
        Assert.Contains("no room left", e.Message, StringComparison.Ordinal);
        Assert.Equal(0, store.Head().Sequence);

        LimitPages(store, more: 100_000);
        ReplayResult result = replay.Into(store);
        Assert.Equal(replay.Undisturbed().Bytes, result.Snapshot.Bytes);
        Assert.Equal(StoredReplay.Records / 100, Assert.Single(store.RefusedByReason(Assert.Single(store.Runs()).Identity)).Value);
    }

    /// <summary>The program itself, on a disk that takes only so much of a file: what is there stays whole, and it goes on from there.</summary>
    [Fact]
    public void Replay_WhereTheDiskFails_SaysSoInOneLineAndGoesOnLater()
    {
        if (OperatingSystem.IsWindows())
        {
            return;
        }

        using StoredReplay replay = new();
        string store = $"sqlite:{_place.DatabaseFile}";
        _place.Open().Dispose();
        long limit = (new FileInfo(_place.DatabaseFile).Length / 1024) + 200;

        ProgramRun stopped;
        using (EvenhandProcess process = EvenhandProcess.StartWithFileLimit((int)limit, ["replay", .. replay.Arguments(store)]))
        {
            stopped = process.Finish();
        }

        Assert.Equal((3, ""), (stopped.ExitCode, stopped.Out));
        Assert.StartsWith($"evenhand: store {store}: the disk failed (", Assert.Single(stopped.ErrorLines), StringComparison.Ordinal);
        Assert.Equal("ok", _place.Scalar<string>("PRAGMA integrity_check"));
        Assert.Equal(0, _place.Scalar<long>("SELECT count(*) FROM snapshot"));

        ProgramRun later = ProgramRun.Replay([.. replay.Arguments(store), "--json"]);
        Assert.Equal(0, later.ExitCode);
        Assert.Contains("an unfinished run goes on after ", later.Error, StringComparison.Ordinal);
        Assert.Equal(replay.Undisturbed().Bytes, Encoding.UTF8.GetBytes(later.Out.TrimEnd('\n')));
    }

    private static void LimitPages(SqliteStore store, int more)
    {
        long now = store.Connection.ExecuteScalar<long>("PRAGMA page_count");
        store.Connection.ExecuteScalar<long>($"PRAGMA max_page_count = {now + more}");
    }
}
