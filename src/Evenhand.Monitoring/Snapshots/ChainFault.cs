namespace Evenhand.Monitoring.Snapshots;

/// <summary>One thing that is wrong with a chain.</summary>
/// <param name="Line">The line of the file, from 1; for faults of the whole file, its last line.</param>
/// <param name="Sequence">
/// The snapshot that breaks: the sequence the line states, or, where that cannot be read or believed, the one
/// due at this place; null only for an empty file.
/// </param>
/// <param name="Kind">What kind of fault it is.</param>
/// <param name="Message">A sentence for the reader of a report.</param>
public sealed record ChainFault(long Line, long? Sequence, ChainFaultKind Kind, string Message);
