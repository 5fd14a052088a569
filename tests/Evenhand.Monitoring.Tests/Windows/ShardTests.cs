using CsCheck;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;
using Evenhand.Monitoring.Windows;
using Xunit;

namespace Evenhand.Monitoring.Tests.Windows;

public sealed class ShardTests
{
    private static readonly Charter Charter = SampleStream.Charter();

    [Theory]
    [InlineData(1)]
    [InlineData(7)]
    public void State_AnyBatchSize_IsTheSameToTheBit(int batchSize)
    {
        List<SampleRecord> records = SampleStream.Random(1, 5000, 40 * EventTime.Day, ids: 4000);
        Shard whole = SampleStream.NewShard(Charter), pieces = SampleStream.NewShard(Charter);

        SampleStream.Feed(whole, Charter, records, 4096);
        SampleStream.Feed(pieces, Charter, records, batchSize);

        Assert.Equal(Bits(whole.Commit()), Bits(pieces.Commit()));
    }

    [Fact]
    public void State_CommittedAndLoadedMidway_GoesOnToTheSameBits()
    {
        List<SampleRecord> records = SampleStream.Random(2, 4000, 3 * EventTime.Day, ids: 3000);
        Shard undisturbed = SampleStream.NewShard(Charter);
        SampleStream.Feed(undisturbed, Charter, records);
        Gen.Int[1, records.Count - 1].Sample(
            half =>
            {
                Shard first = SampleStream.NewShard(Charter);
                SampleStream.Feed(first, Charter, records.Take(half), 7);
                ShardCommit commit = first.Commit();
                Shard second = SampleStream.NewShard(Charter);
                second.Load(ShardHeader.FromBytes(commit.Header.ToBytes()), commit.Dirty, [(commit.FirstId, commit.NewIds)], null);
                SampleStream.Feed(second, Charter, records.Skip(half), 64, half);

                Assert.Equal(undisturbed.Counts.Duplicate, second.Counts.Duplicate);
                Assert.Equal(Sums(undisturbed), Sums(second));
            },
            iter: 20);
    }

    [Fact]
    public void Counts_AnyStream_AddUp() => Gen.Select(Gen.Int, Gen.Int[1, 300], Gen.Bool, Gen.Bool).Sample(
        (seed, ids, hasLateness, hasAhead) =>
        {
            Shard shard = SampleStream.NewShard(Charter, new ShardOptions
            {
                AsOf = SampleStream.Start + EventTime.Day,
                Lateness = hasLateness ? EventTime.Hour : null,
                Ahead = hasAhead ? EventTime.Hour : null,
            });
            SampleStream.Feed(shard, Charter, SampleStream.Random(seed, 200, 2 * EventTime.Day, ids));

            Assert.True(shard.Counts.AddUp);
            Assert.Equal(200, shard.Counts.Read);
            Assert.True(shard.Counts.Excluded > 0);
        },
        iter: 100);

    [Fact]
    public void Duplicate_SameIdWithinTheCharterTime_CountsOnceWhateverTheOrder()
    {
        Assert.Equal(1, DuplicatesOf(0, EventTime.Hour));
        Assert.Equal(1, DuplicatesOf(EventTime.Hour, 0));
        Assert.Equal(0, DuplicatesOf(0, 24 * EventTime.Hour));
        Assert.Equal(0, DuplicatesOf(24 * EventTime.Hour, 0));
        Assert.Equal(1, DuplicatesOf(0, 50 * EventTime.Hour, 1));
    }

    [Fact]
    public void Duplicate_FileGivenTwice_SecondCountsNothing()
    {
        List<SampleRecord> records = SampleStream.Random(3, 2000, 20 * EventTime.Day);
        Shard once = SampleStream.NewShard(Charter), twice = SampleStream.NewShard(Charter);

        SampleStream.Feed(once, Charter, records);
        SampleStream.Feed(twice, Charter, records.Concat(records));

        Assert.Equal(records.Count, twice.Counts.Duplicate);
        Assert.Equal(Sums(once), Sums(twice));
    }

    [Fact]
    public void Time_LateAheadAndExcluded_AreJudgedByTheShardsClock()
    {
        Shard shard = SampleStream.NewShard(Charter, new ShardOptions { AsOf = At(600), Lateness = EventTime.Hour, Ahead = 10 * EventTime.Minute });
        int id = 0;
        SampleRecord Record(int minute) => new(At(minute), id++, 0, 0, 0, DecisionCode.Favourable);

        SampleStream.Feed(shard, Charter, [Record(100), Record(110), Record(121), Record(50), Record(49), Record(600), Record(120)]);

        Assert.Equal(4, shard.Counts.Used);
        Assert.Equal(1, shard.Counts.Ahead);
        Assert.Equal(1, shard.Counts.Late);
        Assert.Equal(1, shard.Counts.Excluded);
        Assert.Equal(["ahead", "late"], shard.TakeRefused().Select(r => r.Reason));
    }

    [Fact]
    public void Slices_MoreThanEightValues_GoToOtherInOrderOfAppearance()
    {
        Shard shard = SampleStream.NewShard(Charter);
        List<SampleRecord> records = [.. Enumerable.Range(0, 10).Select(i => new SampleRecord(At(i), i, 0, 0, 0, DecisionCode.Favourable, Version: $"v{i}"))];
        records.Add(new SampleRecord(At(11), 11, 0, 0, 0, DecisionCode.Favourable, Version: ""));

        SampleStream.Feed(shard, Charter, records);

        Assert.Equal(
            [.. Enumerable.Range(0, 8).Select(i => $"version=v{i}"), "version=(other)", "version=(missing)"],
            shard.SliceNumbers().Select(shard.Slices.Text));
    }

    [Fact]
    public void Outcomes_FromAFile_CountWithinTheTimeAllowedOnly()
    {
        OutcomeIndex outcomes = new();
        RecordBatch batch = new(new RecordLayout(Charter), 8);
        (int Id, long Time)[] given = [(1, At(5)), (2, At(0)), (3, At(1) + (31 * EventTime.Day)), (4, long.MinValue), (5, At(9)), (1, At(6))];
        foreach ((int id, long time) in given)
        {
            batch.Ids[batch.Count] = new IdHash(unchecked((ulong)id * 0x9E3779B97F4A7C15), (ulong)id);
            batch.Times[batch.Count] = time;
            batch.Outcomes[batch.Count] = OutcomeCode.Positive;
            batch.SetSlice(0, default);
            batch.Accept(batch.Count);
        }

        outcomes.Add(batch);
        Shard shard = SampleStream.NewShard(Charter, outcomes: outcomes);
        SampleStream.Feed(shard, Charter, Enumerable.Range(1, 4).Select(id => new SampleRecord(At(1), id, 0, 0, 0, DecisionCode.Favourable)));

        Assert.Equal(2, shard.Counts.OutcomesMatched);
        Assert.Equal(2, shard.Counts.OutcomesOutside);
        Assert.Equal(1, outcomes.Count - outcomes.FoundCount);
        Assert.Equal(1, outcomes.Duplicates);
        Assert.Equal(2, new WindowSums(new SumLayout(Charter), "all", null, Sums(shard)).Counts(new SumLayout(Charter).Groupings[0], 0).Positive);
    }

    private static long At(int minutes) => SampleStream.Start + (minutes * EventTime.Minute);

    private static long DuplicatesOf(params long[] times) => Run(times).Counts.Duplicate;

    private static Shard Run(long[] times)
    {
        Shard shard = SampleStream.NewShard(Charter);
        SampleStream.Feed(shard, Charter, times.Select(t => new SampleRecord(SampleStream.Start + t, 7, 0, 0, 0, DecisionCode.Favourable)));
        return shard;
    }

    private static long[] Sums(Shard shard)
    {
        long[] values = new long[new SumLayout(Charter).Length];
        shard.AddWindow(WindowSpan.All(0, long.MaxValue), 0, values);
        return values;
    }

    private static List<string> Bits(ShardCommit commit) =>
    [
        .. commit.Dirty.Select(b => $"{b.Key} {Convert.ToHexString(b.Packed)}").Order(StringComparer.Ordinal),
        Convert.ToHexString(commit.NewIds),
        System.Text.Encoding.UTF8.GetString(commit.Header.ToBytes()),
    ];
}
