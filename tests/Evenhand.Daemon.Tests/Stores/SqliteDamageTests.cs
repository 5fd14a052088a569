using Dapper;
using Evenhand.Daemon.Stores;
using Evenhand.Daemon.Stores.Sqlite;
using Evenhand.Daemon.Tests.Processes;
using Evenhand.Monitoring.Windows;
using Microsoft.Data.Sqlite;

namespace Evenhand.Daemon.Tests.Stores;

/// <summary>A store whose bytes are damaged is refused in one clear line; it never crashes the program.</summary>
public sealed class SqliteDamageTests : IDisposable
{
    private const int Rounds = 120;

    private readonly SqlitePlace _place = new();
    private readonly StoredReplay _replay = new();

    public void Dispose()
    {
        _place.Dispose();
        _replay.Dispose();
    }

    [Theory]
    [InlineData("bucket", "packed", 5)]
    [InlineData("recent_ids", "ids", 30)]
    [InlineData("run", "header", 40)]
    public void Replay_OverAFlippedByte_SaysThatTheStoreIsDamaged(string table, string column, int at)
    {
        Stop();
        Flip(table, column, at);

        ProgramRun run = ProgramRun.Replay(_replay.Arguments($"sqlite:{_place.DatabaseFile}"));

        Assert.Equal((3, ""), (run.ExitCode, run.Out));
        Assert.Contains("checksum: the store is damaged; restore it, or replay into an empty one", Assert.Single(run.ErrorLines), StringComparison.Ordinal);
    }

    /// <summary>A chain is not built upon where its head says something else than its last snapshot.</summary>
    [Theory]
    [InlineData("DROP TRIGGER chain_head_follows; UPDATE chain_head SET sha256 = 'no hash at all, but as long as one is: 64 characters, one by one'")]
    [InlineData("DROP TRIGGER chain_head_follows; UPDATE chain_head SET sequence = 7")]
    [InlineData("DROP TRIGGER chain_head_no_delete; DELETE FROM chain_head")]
    [InlineData("DROP TRIGGER snapshot_no_delete; DELETE FROM snapshot; UPDATE run SET sequence = NULL, id_key = zeroblob(16) WHERE sequence IS NOT NULL")]
    public void Finish_OnAChainWhoseHeadIsWrong_AppendsNothing(string sql)
    {
        using IStore store = _place.Open();
        SampleCommits.Finished(store, SampleCommits.Identity('a'));
        StoredRun run = store.OpenRun(SampleCommits.Identity('b'), SampleCommits.Charter);
        _place.Execute($"PRAGMA foreign_keys = OFF; {sql}");
        long before = _place.Scalar<long>("SELECT count(*) FROM snapshot");

        StoreException e = Assert.Throws<StoreException>(() => store.Finish(run, SampleCommits.Seal));

        Assert.True(e.IsDamage);
        Assert.Contains("the head of the chain is", e.Message, StringComparison.Ordinal);
        Assert.Equal(before, _place.Scalar<long>("SELECT count(*) FROM snapshot"));
    }

    /// <summary>Bytes of the file itself: SQLite notices some, the checksums others, and some say nothing.</summary>
    [Fact]
    public void Open_AnyDamageToTheFile_IsRefusedInOneLineOrHarmless()
    {
        Stop();
        byte[] sound = File.ReadAllBytes(_place.DatabaseFile), expected = _replay.Undisturbed().Bytes;
        Random random = new(6);
        List<string> unclear = [];
        int refused = 0;
        for (int round = 0; round < Rounds; round++)
        {
            int at = random.Next(sound.Length), length = random.Next(1, 40);
            byte[] damaged = [.. sound];
            random.NextBytes(damaged.AsSpan(at, Math.Min(length, damaged.Length - at)));
            File.WriteAllBytes(_place.DatabaseFile, damaged);
            try
            {
                using IStore store = _place.Open();
                _ = (store.Snapshots(), store.Runs().Select(r => (store.RunLog(r.Identity), store.RefusedByReason(r.Identity))).ToArray(), store.MissingGuards(), store.Head());
                Assert.Equal(expected, _replay.Into(store).Snapshot.Bytes);
            }
            catch (Exception e) when (e is StoreException or StoredStateException)
            {
                refused++;
                Assert.DoesNotContain('\n', e.Message);
            }
            catch (Exception e)
            {
                unclear.Add($"{length} bytes at {at}: {e}");
            }
        }

        Assert.True(unclear.Count == 0, string.Join('\n', unclear));
        Assert.InRange(refused, Rounds / 5, Rounds);
    }

    private void Stop()
    {
        using IStore store = _place.Open();
        _replay.StopAfter(store, commits: 4);
    }

    private void Flip(string table, string column, int at)
    {
        using SqliteConnection connection = SqliteConnections.Writer(_place.DatabaseFile);
        (long row, byte[] bytes) = connection.QueryFirst<(long, byte[])>($"SELECT rowid, {column} FROM {table} ORDER BY rowid DESC");
        bytes[at] ^= 1;
        Assert.Equal(1, connection.Execute($"UPDATE {table} SET {column} = @bytes WHERE rowid = @row", new { row, bytes }));
    }
}
