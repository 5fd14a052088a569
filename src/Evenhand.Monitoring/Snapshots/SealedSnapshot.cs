namespace Evenhand.Monitoring.Snapshots;

/// <summary>A snapshot document that has its place in a chain.</summary>
/// <param name="Sequence">Its place, from 1.</param>
/// <param name="Sha256">Its hash, 64 lower-case hexadecimal digits; the next snapshot's <c>previous_sha256</c>.</param>
/// <param name="Bytes">The document as stored and exported: canonical JSON (RFC 8785), without a final newline.</param>
public sealed record SealedSnapshot(long Sequence, string Sha256, byte[] Bytes);
