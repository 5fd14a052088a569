namespace Evenhand.Daemon.Stores;

/// <summary>The head of the chain.</summary>
/// <param name="Sequence">Sequence of the last snapshot; 0 for an empty chain.</param>
/// <param name="Sha256">Its hash; 64 zeros for an empty chain.</param>
internal sealed record ChainHead(long Sequence, string Sha256);
