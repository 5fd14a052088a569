namespace Evenhand.Daemon.Stores;

/// <summary>What stands beside a stored snapshot.</summary>
/// <param name="Sequence">Its place in the chain, from 1.</param>
/// <param name="Kind">Why it was taken, such as <c>replay</c>.</param>
/// <param name="Charter">The charter's id.</param>
/// <param name="AsOf">Its as-of, RFC 3339.</param>
/// <param name="CreatedAt">When it was made, RFC 3339.</param>
/// <param name="PreviousSha256">Hash of the one before it.</param>
/// <param name="Sha256">Its hash.</param>
/// <param name="Size">Bytes of the document.</param>
internal sealed record SnapshotEntry(
    long Sequence,
    string Kind,
    string Charter,
    string AsOf,
    string CreatedAt,
    string PreviousSha256,
    string Sha256,
    long Size);
