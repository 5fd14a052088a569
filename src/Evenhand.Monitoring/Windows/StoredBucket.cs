namespace Evenhand.Monitoring.Windows;

/// <summary>A bucket in its stored form.</summary>
/// <param name="Key">Which bucket.</param>
/// <param name="Packed">What <see cref="BucketCodec"/> packed.</param>
public sealed record StoredBucket(BucketKey Key, byte[] Packed);
