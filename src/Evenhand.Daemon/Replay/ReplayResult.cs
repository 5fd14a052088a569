using Evenhand.Monitoring.Snapshots;

namespace Evenhand.Daemon.Replay;

/// <summary>What a replay came to.</summary>
/// <param name="Snapshot">The sealed snapshot.</param>
/// <param name="IsRepeated">Whether the store held the finished run already, so that nothing was read.</param>
/// <param name="Remarks">What a person should know beside the snapshot, a sentence each.</param>
internal sealed record ReplayResult(SealedSnapshot Snapshot, bool IsRepeated, IReadOnlyList<string> Remarks);
