using Evenhand.Monitoring.Measures;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Alerts;

/// <summary>What one tick came to; numbers not yet withheld.</summary>
/// <param name="AsOf">The as-of, in microseconds since 1970-01-01T00:00:00Z.</param>
/// <param name="Spans">The windows' exact bounds: the charter's in charter order, then <c>all</c>.</param>
/// <param name="Sums">The sums of each window, all slices together, then by slice.</param>
/// <param name="Baselines">The sums that windows are compared with, named as their window.</param>
/// <param name="Readings">The readings, in the order of <paramref name="Sums"/>.</param>
/// <param name="Judgements">The rules' words.</param>
public sealed record TickResult(
    long AsOf,
    IReadOnlyList<WindowSpan> Spans,
    IReadOnlyList<WindowSums> Sums,
    IReadOnlyList<WindowSums> Baselines,
    IReadOnlyList<Reading> Readings,
    IReadOnlyList<Judgement> Judgements);
