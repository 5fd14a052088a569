namespace Evenhand.Monitoring.Windows;

/// <summary>Everything that a shard hands to the store in one transaction.</summary>
/// <param name="Header">Counts, clock, slices and position, as <see cref="ShardHeader"/> writes them.</param>
/// <param name="Dirty">Buckets that changed.</param>
/// <param name="Dropped">Buckets too old to be kept.</param>
/// <param name="FirstId">How many ids had been added before <paramref name="NewIds"/>.</param>
/// <param name="NewIds">Ids seen since the last commit, packed, with a checksum behind; empty where there are none.</param>
/// <param name="ForgottenIds">Ids with a number below this are remembered no longer.</param>
/// <param name="Refused">Records refused since the last commit.</param>
/// <param name="FoundOutcomes">Bits of outcomes whose decision has been seen; null without an outcomes file.</param>
public sealed record ShardCommit(
    ShardHeader Header,
    IReadOnlyList<StoredBucket> Dirty,
    IReadOnlyList<BucketKey> Dropped,
    long FirstId,
    byte[] NewIds,
    long ForgottenIds,
    IReadOnlyList<RefusedEntry> Refused,
    byte[]? FoundOutcomes)
{
    /// <summary>Bytes of one id in <see cref="NewIds"/>.</summary>
    public const int IdBytes = RecentIds.EntryBytes;
}
