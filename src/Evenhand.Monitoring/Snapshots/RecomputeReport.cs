namespace Evenhand.Monitoring.Snapshots;

/// <summary>What deriving a snapshot's readings again came to.</summary>
/// <param name="Compared">Readings derived again and compared.</param>
/// <param name="NotRecomputable">Readings that rest on sums which the state withholds.</param>
/// <param name="Differences">A sentence for each reading that differs, is missing or is too many.</param>
public sealed record RecomputeReport(int Compared, int NotRecomputable, IReadOnlyList<string> Differences);
