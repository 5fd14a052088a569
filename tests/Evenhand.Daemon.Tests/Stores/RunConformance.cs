using System.Text;
using Evenhand.Daemon.Stores;
using Evenhand.Monitoring.Windows;
using static Evenhand.Daemon.Tests.Stores.SampleCommits;

namespace Evenhand.Daemon.Tests.Stores;

/// <summary>What every store promises of runs and commits; a kind of store derives from it.</summary>
public abstract class RunConformance : StoreConformance
{
    private static readonly string A = Identity('a');

    private protected RunConformance(IStorePlace place)
        : base(place)
    {
    }

    [Fact]
    public void OpenRun_NotSeenBefore_IsEmptyWithAKeyOfItsOwn()
    {
        using IStore store = Open();
        StoredRun run = store.OpenRun(A, Charter), other = store.OpenRun(Identity('b'), Charter);

        Assert.Equal((A, Charter, 1L), (run.Identity, run.Charter, run.Epoch));
        Assert.Null(run.Header);
        Assert.Null(run.Snapshot);
        Assert.Empty(run.Buckets);
        Assert.Empty(run.Ids);
        Assert.Equal(16, run.IdKey.Length);
        Assert.NotEqual(run.IdKey, other.IdKey);
        Assert.Equal([new RunEntry(A, Charter, null), new RunEntry(Identity('b'), Charter, null)], store.Runs());
    }

    [Fact]
    public void Commit_OfEverything_IsThereWhenOpenedAgain()
    {
        ShardHeader header = new()
        {
            NextOffsets = [7, 0],
            Ended = [true, false],
            Newest = 1_932_595_200_000_001,
            Oldest = -1,
            Slices = [["1", "zwei \u00FC \uD83D\uDE00"]],
            Counts = new ShardCounts { Read = 7, Used = 5, Rejected = 2 },
        };
        byte[] ids = [.. Enumerable.Range(0, 2 * ShardCommit.IdBytes).Select(i => (byte)i)];
        StoredBucket[] buckets = [new(new BucketKey(Tier.Minute, -60_000_000, 3), [9]), Day(5, 0, 255, 128), new(new BucketKey(Tier.All, 0, 0), [1, 2, 3])];
        byte[] key;
        using (IStore store = Open())
        {
            StoredRun run = store.OpenRun(A, Charter);
            key = run.IdKey;
            store.Commit(
                run,
                new ShardCommit(header, buckets, [], 0, ids, 0, [new RefusedEntry(0, 3, Reason, [0, 1]), new RefusedEntry(1, 3, "late")], [0b101]),
                [new RunLogEntry(7, "clock_advanced", """{"to":1}""")]);
        }

        using IStore again = Open();
        StoredRun stored = again.OpenRun(A, Charter);
        Assert.Equal(Encoding.UTF8.GetString(header.ToBytes()), Encoding.UTF8.GetString(stored.Header!.ToBytes()));
        Assert.Equal(buckets.Select(Text).Order(), stored.Buckets.Select(Text).Order());
        Assert.Equal((0L, Convert.ToHexString(ids)), Assert.Single(stored.Ids.Select(i => (i.First, Convert.ToHexString(i.Ids)))));
        Assert.Equal([0b101], stored.FoundOutcomes!);
        Assert.Equal(key, stored.IdKey);
        Assert.Equal(2, stored.Epoch);
        Assert.Equal(new Dictionary<string, long> { [Reason] = 1, ["late"] = 1 }, again.RefusedByReason(A));
        Assert.Equal([(0L, "started"), (7L, "clock_advanced"), (7L, "resumed")], again.RunLog(A).Select(e => (e.Position, e.Kind)));
        Assert.Equal("""{"to":1}""", again.RunLog(A)[1].Body);
    }

    [Fact]
    public void Commit_OnAnEarlierOne_ReplacesDropsAndForgets()
    {
        const int Id = ShardCommit.IdBytes;
        using IStore store = Open();
        StoredRun run = store.OpenRun(A, Charter);
        store.Commit(run, At(4) with { Dirty = [Day(1, 1), Day(2, 2), Day(3, 3)], NewIds = new byte[2 * Id] });
        store.Commit(run, At(9) with { Dirty = [Day(2, 22)], Dropped = [Day(1).Key, Day(8).Key], FirstId = 2, NewIds = new byte[3 * Id], ForgottenIds = 2 });
        store.Commit(run, At(9) with { Dirty = [Day(4, 4)], FirstId = 5, ForgottenIds = 4 });

        StoredRun stored = store.OpenRun(A, Charter);
        Assert.Equal([Text(Day(2, 22)), Text(Day(3, 3)), Text(Day(4, 4))], stored.Buckets.Select(Text).Order());

        // The second chunk holds a remembered id, so the whole of it stays.
        Assert.Equal([(2L, 3 * Id)], stored.Ids.Select(i => (i.First, i.Ids.Length)));
        Assert.Equal(9, stored.Header!.NextOffsets[0]);
    }

    [Fact]
    public void Commit_OfTwoRuns_KeepsThemApart()
    {
        using IStore store = Open();
        StoredRun a = store.OpenRun(A, Charter), b = store.OpenRun(Identity('b'), Charter);
        store.Commit(a, At(1) with { Dirty = [Day(1, 1)], Refused = [new RefusedEntry(0, 0, Reason)] });
        store.Commit(b, At(2) with { Dirty = [Day(1, 2)], Refused = [new RefusedEntry(0, 0, "late")] });
        store.Finish(b, Seal);

        Assert.Equal([Text(Day(1, 1))], store.OpenRun(A, Charter).Buckets.Select(Text));
        Assert.Equal([Reason], store.RefusedByReason(A).Keys);
        Assert.Equal(["late"], store.RefusedByReason(Identity('b')).Keys);
        Assert.Empty(store.RefusedByReason(Identity('c')));
        Assert.Empty(store.RunLog(Identity('c')));
    }

    /// <summary>Two holders of one opening: whoever did not see the other's commit must not write over it.</summary>
    [Fact]
    public void Commit_FromAnotherOffsetThanStored_StoresNothing()
    {
        using IStore store = Open();
        StoredRun run = store.OpenRun(A, Charter);
        StoredRun behind = new() { Number = run.Number, Identity = A, Charter = Charter, Epoch = run.Epoch, IdKey = run.IdKey, ExpectedOffsets = run.ExpectedOffsets };
        store.Commit(run, At(5) with { Dirty = [Day(1, 5)] });

        AssertRefused(() => store.Commit(behind, At(3) with { Dirty = [Day(1, 3)], Refused = [new RefusedEntry(0, 0, Reason)] }));
        AssertRefused(() => store.Finish(behind, Seal));

        store.Commit(run, At(6));
        Assert.Equal([Text(Day(1, 5))], store.OpenRun(A, Charter).Buckets.Select(Text));
        Assert.Empty(store.RefusedByReason(A));
        Assert.Empty(store.Snapshots());
    }

    [Fact]
    public void Commit_ByARunThatWasTakenOver_StoresNothing()
    {
        using IStore store = Open();
        StoredRun first = store.OpenRun(A, Charter);
        StoredRun second = store.OpenRun(A, Charter);

        AssertRefused(() => store.Commit(first, At(1) with { Dirty = [Day(1, 1)] }));
        AssertRefused(() => store.Finish(first, Seal));
        store.Commit(second, At(1) with { Dirty = [Day(1, 2)] });

        Assert.Equal([Text(Day(1, 2))], store.OpenRun(A, Charter).Buckets.Select(Text));
        Assert.Empty(store.Snapshots());
    }

    /// <summary>A record refused twice breaks the commit after its buckets, ids and header have been written.</summary>
    [Fact]
    public void Commit_ThatFailsHalfWay_LeavesNothingOfItselfAndEndsTheRun()
    {
        using IStore store = Open();
        StoredRun run = store.OpenRun(A, Charter);
        store.Commit(run, At(1) with { Dirty = [Day(1, 1)] });

        ShardCommit broken = At(2) with
        {
            Dirty = [Day(1, 2), Day(2, 2)],
            NewIds = new byte[ShardCommit.IdBytes],
            Refused = [new RefusedEntry(0, 1, Reason), new RefusedEntry(0, 1, Reason)],
        };
        AssertOneLine(Assert.ThrowsAny<StoreException>(() => store.Commit(run, broken, [new RunLogEntry(2, "clock_advanced", "{}")])));
        AssertOneLine(Assert.ThrowsAny<StoreException>(() => store.Commit(run, At(3))));

        StoredRun stored = store.OpenRun(A, Charter);
        Assert.Equal(1, stored.Header!.NextOffsets[0]);
        Assert.Equal([Text(Day(1, 1))], stored.Buckets.Select(Text));
        Assert.Empty(stored.Ids);
        Assert.Empty(store.RefusedByReason(A));
        Assert.Equal(["started", "resumed"], store.RunLog(A).Select(e => e.Kind));
        store.Commit(stored, At(2));
    }

    private static void AssertRefused(Action call)
    {
        StoreException e = Assert.ThrowsAny<StoreException>(call);
        Assert.Contains("nothing was stored", e.Message, StringComparison.Ordinal);
        AssertOneLine(e);
    }

    private static void AssertOneLine(StoreException e) => Assert.DoesNotContain('\n', e.Message);

    private static string Text(StoredBucket bucket) => $"{bucket.Key} {Convert.ToHexString(bucket.Packed)}";
}
