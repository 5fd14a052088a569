using System.Data.Common;
using System.Text.Json.Nodes;
using Evenhand.Daemon.Stores;
using Evenhand.Monitoring.Snapshots;
using static Evenhand.Daemon.Tests.Stores.SampleCommits;

namespace Evenhand.Daemon.Tests.Stores;

/// <summary>What every store promises of finished runs, the chain of snapshots, and who may write; a kind of store derives from it.</summary>
public abstract class ChainConformance : StoreConformance
{
    private static readonly string A = Identity('a');

    private protected ChainConformance(IStorePlace place)
        : base(place)
    {
    }

    [Fact]
    public void Open_NothingStoredYet_HasAnEmptyChain()
    {
        using IStore store = Open();
        Assert.Equal(new ChainHead(0, SnapshotSeal.Genesis), store.Head());
        Assert.Empty(store.Snapshots());
        Assert.Empty(store.Runs());
        Assert.Empty(store.MissingGuards());
        Assert.Null(store.Snapshot(1));
    }

    [Fact]
    public void Finish_OfThreeRuns_ChainsTheirSnapshots()
    {
        SealedSnapshot[] chain;
        using (IStore store = Open())
        {
            chain = [.. "abc".Select(digit => Finished(store, Identity(digit)))];
        }

        using IEvidenceStore reader = OpenReadOnly();
        Assert.Equal([1L, 2L, 3L], chain.Select(s => s.Sequence));
        Assert.Equal(new ChainHead(3, chain[2].Sha256), reader.Head());
        Assert.Equal([SnapshotSeal.Genesis, chain[0].Sha256, chain[1].Sha256], chain.Select(PreviousOf));
        Assert.Equal(chain.Select(s => Convert.ToHexString(s.Bytes)), chain.Select(s => Convert.ToHexString(reader.Snapshot(s.Sequence)!)));
        Assert.Equal(
            chain.Select(s => new SnapshotEntry(s.Sequence, "replay", Charter, "2031-03-01T00:00:00Z", "2031-03-02T00:00:00Z", PreviousOf(s), s.Sha256, s.Bytes.Length)),
            reader.Snapshots());
        Assert.Equal([1L, 2L, 3L], reader.Runs().Select(r => r.Sequence!.Value));
        Assert.True(ChainVerifier.Verify([.. chain.SelectMany(s => s.Bytes.Append((byte)'\n'))], reader.Head().Sha256).Intact);
    }

    [Fact]
    public void OpenRun_ThatIsFinished_GivesItsSnapshotAndAppendsNothing()
    {
        using IStore store = Open();
        SealedSnapshot one = Finished(store, A);
        Finished(store, Identity('b'));

        StoredRun again = store.OpenRun(A, Charter);

        Assert.Equal((one.Sequence, one.Sha256), (again.Snapshot!.Sequence, again.Snapshot.Sha256));
        Assert.Equal(one.Bytes, again.Snapshot.Bytes);
        Assert.Empty(again.IdKey);
        Assert.Empty(again.Buckets);
        Assert.Empty(again.Ids);
        Assert.Equal(2, store.Head().Sequence);
        Assert.Equal(["started", "finished"], store.RunLog(A).Select(e => e.Kind));
        JsonNode body = JsonNode.Parse(store.RunLog(A)[1].Body)!;
        Assert.Equal((1L, one.Sha256), ((long)body["sequence"]!, (string?)body["sha256"]));
        Assert.Equal(1, store.RefusedByReason(A)[Reason]);
    }

    [Fact]
    public void Commit_OfARunThatIsFinished_StoresNothing()
    {
        using IStore store = Open();
        StoredRun run = store.OpenRun(A, Charter);
        store.Commit(run, At(1));
        store.Finish(run, Seal);

        Assert.ThrowsAny<StoreException>(() => store.Finish(run, Seal));
        Assert.ThrowsAny<StoreException>(() => store.Commit(run, At(2)));
        Assert.Equal(1, store.Head().Sequence);
        Assert.NotNull(store.OpenRun(A, Charter).Snapshot);
    }

    [Fact]
    public void Finish_WhereSealingFails_AppendsNothingAndCanBeDoneAgain()
    {
        using IStore store = Open();
        StoredRun run = store.OpenRun(A, Charter);
        store.Commit(run, At(1) with { Dirty = [Day(1, 1)] });

        Assert.Throws<InvalidOperationException>(() => store.Finish(run, (_, _) => throw new InvalidOperationException("no seal")));
        Assert.Equal(new ChainHead(0, SnapshotSeal.Genesis), store.Head());
        Assert.Empty(store.Snapshots());

        store.Finish(run, Seal);
        Assert.Equal(1, store.Head().Sequence);
    }

    [Theory]
    [InlineData(2, 0)]
    [InlineData(1, 7)]
    public void Finish_WithASnapshotThatDoesNotFollow_AppendsNothing(long sequence, int previous)
    {
        using IStore store = Open();
        StoredRun run = store.OpenRun(A, Charter);
        store.Commit(run, At(1));

        SealedSnapshot wrong = sequence == 1 ? Seal(1, SnapshotSeal.Genesis) with { Sha256 = new string('x', previous) } : Seal(sequence, new string('5', 64));
        Assert.ThrowsAny<StoreException>(() => store.Finish(run, (_, _) => wrong));

        Assert.Equal(0, store.Head().Sequence);
        Assert.Null(store.OpenRun(A, Charter).Snapshot);
    }

    /// <summary>The tables' own guard: whoever comes past the program cannot change what was sealed either.</summary>
    [Theory]
    [InlineData("UPDATE snapshot SET kind = 'manual' WHERE sequence = 1")]
    [InlineData("UPDATE snapshot SET sequence = 9 WHERE sequence = 2")]
    [InlineData("DELETE FROM snapshot")]
    [InlineData("DELETE FROM snapshot WHERE sequence = 2")]
    [InlineData("INSERT INTO snapshot SELECT sequence + 5, kind, charter, as_of, created_at, sha256, sha256, document FROM snapshot WHERE sequence = 2")]
    [InlineData("INSERT INTO snapshot SELECT sequence + 1, kind, charter, as_of, created_at, previous_sha256, sha256, document FROM snapshot WHERE sequence = 2")]
    [InlineData("DELETE FROM chain_head")]
    [InlineData("UPDATE chain_head SET sequence = 1")]
    public void Chain_TamperedWithBySql_Refuses(string sql)
    {
        using IStore store = Open();
        SealedSnapshot one = Finished(store, A), two = Finished(store, Identity('b'));

        Assert.ThrowsAny<DbException>(() => Execute(sql));

        Assert.Equal(new ChainHead(2, two.Sha256), store.Head());
        Assert.Equal([one.Sha256, two.Sha256], store.Snapshots().Select(s => s.Sha256));
        Assert.Equal(one.Bytes, store.Snapshot(1));
    }

    [Fact]
    public void Open_WhileAnotherWrites_IsRefusedUntilItCloses()
    {
        using (IStore store = Open())
        {
            Finished(store, A);
            StoreHeldException e = Assert.Throws<StoreHeldException>(Open);
            Assert.True(e.CanRetry);
            Assert.DoesNotContain('\n', e.Message);
            using IEvidenceStore reader = OpenReadOnly();
            Assert.Single(reader.Snapshots());
        }

        using IStore next = Open();
        Assert.Single(next.Snapshots());
    }

    [Fact]
    public void OpenReadOnly_WhileAnotherAppends_KeepsTheViewThatItBeganWith()
    {
        using IStore store = Open();
        SealedSnapshot one = Finished(store, A);
        using IEvidenceStore reader = OpenReadOnly();

        SealedSnapshot two = Finished(store, Identity('b'));

        Assert.Equal(new ChainHead(1, one.Sha256), reader.Head());
        Assert.Single(reader.Snapshots());
        Assert.Null(reader.Snapshot(2));
        using IEvidenceStore later = OpenReadOnly();
        Assert.Equal(new ChainHead(2, two.Sha256), later.Head());
    }

    private static string PreviousOf(SealedSnapshot snapshot) => (string)JsonNode.Parse(snapshot.Bytes)!["previous_sha256"]!;
}
