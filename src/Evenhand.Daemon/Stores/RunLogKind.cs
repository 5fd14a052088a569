namespace Evenhand.Daemon.Stores;

/// <summary>The kinds of run-log entries. The texts are stored: they never change.</summary>
internal static class RunLogKind
{
    /// <summary>The run was opened for the first time; body <c>{"identity": hash, "version": text}</c>.</summary>
    public const string Started = "started";

    /// <summary>An unfinished run was opened again; body <c>{"version": text}</c>.</summary>
    public const string Resumed = "resumed";

    /// <summary>The run's snapshot was appended; body <c>{"sequence": n, "sha256": hash}</c>.</summary>
    public const string Finished = "finished";
}
