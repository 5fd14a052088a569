namespace Evenhand.Daemon.Stores;

/// <summary>A run that the store knows.</summary>
/// <param name="Identity">Its identity.</param>
/// <param name="Charter">The charter's id.</param>
/// <param name="Sequence">Sequence of its snapshot; null while unfinished.</param>
internal sealed record RunEntry(string Identity, string Charter, long? Sequence);
