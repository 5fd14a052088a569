namespace Evenhand.Monitoring.Windows;

/// <summary>Which bucket of a shard.</summary>
/// <param name="Tier">Its length.</param>
/// <param name="Start">Its start in microseconds since 1970-01-01T00:00:00Z; 0 for <see cref="Tier.All"/>.</param>
/// <param name="Slice">0 for all slices together, else 1 + the slice's number in the shard's <see cref="SliceTable"/>.</param>
public readonly record struct BucketKey(Tier Tier, long Start, int Slice);
