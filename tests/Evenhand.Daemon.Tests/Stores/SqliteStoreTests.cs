using System.Text.Json.Nodes;
using Dapper;
using Evenhand.Daemon.Stores;
using Evenhand.Daemon.Stores.Sqlite;
using Evenhand.Monitoring.Snapshots;
using Evenhand.Monitoring.Windows;
using Microsoft.Data.Sqlite;

namespace Evenhand.Daemon.Tests.Stores;

public sealed class SqliteStoreTests : IDisposable
{
    private static readonly string Identity = new('a', 64);

    private readonly string _folder = Directory.CreateTempSubdirectory("evenhand-store").FullName;

    private string DatabaseFile => Path.Combine(_folder, "evidence.db");

    [Fact]
    public void Commit_ThenOpenedAgain_GivesBackWhatWasStored()
    {
        using (SqliteStore store = SqliteStore.Open(DatabaseFile))
        {
            StoredRun run = store.OpenRun(Identity, "flood-grants");
            store.Commit(run, Commit(1, [new StoredBucket(new BucketKey(Tier.Day, 5, 0), [1, 2, 3])], 0, new byte[40]));
            store.Commit(run, Commit(2, [new StoredBucket(new BucketKey(Tier.Day, 5, 0), [4])], 2, new byte[20]));
        }

        using SqliteStore again = SqliteStore.Open(DatabaseFile);
        StoredRun resumed = again.OpenRun(Identity, "flood-grants");
        Assert.Equal(2, resumed.Header!.NextOffsets[0]);
        Assert.Equal([4], Assert.Single(resumed.Buckets).Packed);
        Assert.Equal([0L, 2L], resumed.Ids.Select(i => i.First));
        Assert.Equal(["started", "resumed"], again.RunLog(Identity).Select(e => e.Kind));
        Assert.Equal(2, again.RefusedByReason(Identity)["bad_time"]);
    }

    [Fact]
    public void Commit_ByARunThatWasTakenOver_StoresNothing()
    {
        using SqliteStore store = SqliteStore.Open(DatabaseFile);
        StoredRun first = store.OpenRun(Identity, "flood-grants");
        StoredRun second = store.OpenRun(Identity, "flood-grants");

        Assert.Throws<StoreException>(() => store.Commit(first, Commit(1, [], 0, [])));
        store.Commit(second, Commit(1, [], 0, []));

        Assert.Equal(1, store.RefusedByReason(Identity)["bad_time"]);
    }

    [Fact]
    public void Finish_AppendsToTheChain_AndTheRunIsGivenBackFinished()
    {
        using SqliteStore store = SqliteStore.Open(DatabaseFile);
        SealedSnapshot one = Finish(store, Identity), two = Finish(store, new string('b', 64));

        Assert.Equal(2, two.Sequence);
        Assert.Equal(one.Bytes, store.OpenRun(Identity, "flood-grants").Snapshot!.Bytes);
        Assert.Equal(two.Sha256, store.Head().Sha256);
        Assert.Equal(0, Raw<long>("SELECT count(*) FROM bucket"));
        Assert.Empty(store.MissingGuards());
    }

    [Theory]
    [InlineData("UPDATE snapshot SET document = x'7b7d'")]
    [InlineData("DELETE FROM snapshot")]
    [InlineData("INSERT INTO snapshot SELECT sequence + 5, kind, charter, as_of, created_at, previous_sha256, sha256, document FROM snapshot")]
    [InlineData("INSERT INTO snapshot SELECT sequence + 1, kind, charter, as_of, created_at, previous_sha256, sha256, document FROM snapshot")]
    [InlineData("DELETE FROM chain_head")]
    [InlineData("UPDATE chain_head SET sequence = 0")]
    public void Chain_TamperedWithBySql_Refuses(string sql)
    {
        using SqliteStore store = SqliteStore.Open(DatabaseFile);
        Finish(store, Identity);
        SqliteException e = Assert.Throws<SqliteException>(() => Raw<long>(sql));
        Assert.Equal(19, e.SqliteErrorCode);
    }

    [Fact]
    public void Open_WhileAnotherWrites_SaysSoAndReadingGoesOn()
    {
        using SqliteStore store = SqliteStore.Open(DatabaseFile);
        Finish(store, Identity);
        Assert.Throws<StoreHeldException>(() => SqliteStore.Open(DatabaseFile));
        using SqliteEvidence reader = SqliteEvidence.Open(DatabaseFile);
        Assert.Single(reader.Snapshots());
    }

    [Fact]
    public void Open_NoDatabaseOrNoFolder_GivesOneClearLine()
    {
        File.WriteAllText(DatabaseFile, string.Concat(Enumerable.Repeat("no database at all ", 100)));
        Assert.Contains("not a SQLite database", Assert.Throws<StoreException>(() => SqliteStore.Open(DatabaseFile)).Message, StringComparison.Ordinal);
        Assert.Contains("does not exist", Assert.Throws<StoreException>(() => SqliteStore.Open(Path.Combine(_folder, "none", "x.db"))).Message, StringComparison.Ordinal);
        Assert.Contains("no such store", Assert.Throws<StoreException>(() => SqliteEvidence.Open(Path.Combine(_folder, "none.db"))).Message, StringComparison.Ordinal);
    }

    [Fact]
    public void Open_WrittenByALaterVersion_IsRefused()
    {
        SqliteStore.Open(DatabaseFile).Dispose();
        Raw<long>("INSERT INTO schema_version (ScriptName, Applied) VALUES ('sqlite/9999-later', '2040-01-01')");
        Assert.Contains("later version", Assert.Throws<StoreException>(() => SqliteStore.Open(DatabaseFile)).Message, StringComparison.Ordinal);
    }

    public void Dispose() => Directory.Delete(_folder, recursive: true);

    private static SealedSnapshot Finish(SqliteStore store, string identity)
    {
        StoredRun run = store.OpenRun(identity, "flood-grants");
        store.Commit(run, Commit(1, [new StoredBucket(new BucketKey(Tier.All, 0, 0), [1])], 0, []));
        return store.Finish(run, (sequence, previous) => SnapshotSeal.Seal(
            new JsonObject
            {
                ["format"] = "evenhand-snapshot/1",
                ["kind"] = "replay",
                ["charter"] = new JsonObject { ["id"] = "flood-grants" },
                ["as_of"] = "2031-03-01T00:00:00Z",
                ["created_at"] = "2031-03-01T00:00:00Z",
            },
            sequence,
            previous));
    }

    private static ShardCommit Commit(long offset, IReadOnlyList<StoredBucket> dirty, long firstId, byte[] ids) => new(
        new ShardHeader { NextOffsets = [offset], Ended = [false], Slices = [], Counts = new ShardCounts { Read = offset, Rejected = offset } },
        dirty,
        [],
        firstId,
        ids,
        0,
        [new RefusedEntry(0, offset, "bad_time")],
        null);

    private T Raw<T>(string sql)
    {
        using SqliteConnection connection = SqliteConnections.Writer(DatabaseFile);
        return connection.ExecuteScalar<T>(sql)!;
    }
}
