namespace Evenhand.Monitoring.Windows;

/// <summary>How a shard judges time.</summary>
public sealed record ShardOptions
{
    /// <summary>Records at or after this instant are excluded, in microseconds; null takes all.</summary>
    public long? AsOf { get; init; }

    /// <summary>How much older than the newest event time a record may be, in microseconds; null takes all.</summary>
    public long? Lateness { get; init; }

    /// <summary>How much newer than the newest event time a record may be, in microseconds; null takes all. The first record sets the clock.</summary>
    public long? Ahead { get; init; }
}
