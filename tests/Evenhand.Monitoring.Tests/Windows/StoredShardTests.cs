using System.Text;
using System.Text.Json;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Windows;
using Xunit;

namespace Evenhand.Monitoring.Tests.Windows;

/// <summary>What a shard stores comes back whole or not at all.</summary>
public sealed class StoredShardTests
{
    private static readonly Charter Charter = SampleStream.Charter();

    [Fact]
    public void Header_AsStored_IsOneJsonObjectThatComesBack()
    {
        byte[] stored = Commit().Header.ToBytes();
        using JsonDocument document = JsonDocument.Parse(stored);
        Assert.Equal("check", document.RootElement.EnumerateObject().Last().Name);
        Assert.Equal(Encoding.UTF8.GetString(stored), Encoding.UTF8.GetString(ShardHeader.FromBytes(stored).ToBytes()));
    }

    [Theory]
    [InlineData(0x01)]
    [InlineData(0x20)]
    [InlineData(0x80)]
    public void Header_AnyByteFlippedOrCutOff_IsRefused(byte flip)
    {
        byte[] stored = Commit().Header.ToBytes();
        for (int i = 0; i < stored.Length; i++)
        {
            byte[] damaged = [.. stored];
            damaged[i] ^= flip;
            Assert.Throws<StoredStateException>(() => ShardHeader.FromBytes(damaged));
            Assert.Throws<StoredStateException>(() => ShardHeader.FromBytes(stored.AsSpan(0, i)));
        }
    }

    [Fact]
    public void Ids_FlippedOrCutOff_AreRefused()
    {
        ShardCommit commit = Commit();
        Assert.Equal(20, commit.NewIds.Length / ShardCommit.IdBytes);
        for (int i = 0; i < commit.NewIds.Length; i += 7)
        {
            byte[] damaged = [.. commit.NewIds];
            damaged[i] ^= 0x10;
            Assert.Throws<StoredStateException>(() => Load(commit, commit.Dirty, damaged));
            Assert.Throws<StoredStateException>(() => Load(commit, commit.Dirty, commit.NewIds[..(i + 1)]));
        }
    }

    [Fact]
    public void Bucket_WithAFlippedByte_IsRefusedWhenLoadedWhetherNeededOrNot()
    {
        ShardCommit commit = Commit();
        for (int i = 0; i < commit.Dirty.Count; i++)
        {
            StoredBucket[] buckets = [.. commit.Dirty];
            byte[] damaged = [.. buckets[i].Packed];
            damaged[^9] ^= 1;
            buckets[i] = buckets[i] with { Packed = damaged };
            Assert.Throws<StoredStateException>(() => Load(commit, buckets, commit.NewIds));
        }
    }

    [Fact]
    public void Commit_WithoutNewRecords_HoldsNoIds()
    {
        Shard shard = SampleStream.NewShard(Charter);
        SampleStream.Feed(shard, Charter, SampleStream.Random(3, 20, EventTime.Day));
        shard.Commit();
        ShardCommit empty = shard.Commit();
        Assert.Empty(empty.NewIds);
        Assert.Equal(20, empty.FirstId);
        Load(empty, [], empty.NewIds);
    }

    private static ShardCommit Commit()
    {
        Shard shard = SampleStream.NewShard(Charter);
        SampleStream.Feed(shard, Charter, SampleStream.Random(3, 20, EventTime.Day));
        return shard.Commit();
    }

    private static void Load(ShardCommit commit, IEnumerable<StoredBucket> buckets, byte[] ids) =>
        SampleStream.NewShard(Charter).Load(commit.Header, buckets, [(commit.FirstId, ids)], commit.FoundOutcomes);
}
