namespace Evenhand.Monitoring.Snapshots;

/// <summary>How far a source has been read.</summary>
/// <param name="Source">The source, such as <c>file:decisions.ndjson</c>.</param>
/// <param name="Partition">The partition; 0 for a file.</param>
/// <param name="NextOffset">The first record that has not been read.</param>
public sealed record SnapshotSource(string Source, int Partition, long NextOffset);
