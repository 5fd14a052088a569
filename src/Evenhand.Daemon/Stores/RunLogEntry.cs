namespace Evenhand.Daemon.Stores;

/// <summary>A decision about a run that did not come from a record.</summary>
/// <param name="Position">How many records had been read when it was made.</param>
/// <param name="Kind">A text of <see cref="RunLogKind"/>.</param>
/// <param name="Body">What was decided, a JSON object.</param>
internal sealed record RunLogEntry(long Position, string Kind, string Body);
