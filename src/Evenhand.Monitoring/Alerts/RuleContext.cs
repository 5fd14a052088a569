using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Measures;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Alerts;

/// <summary>What rules are judged on at one tick.</summary>
public sealed class RuleContext
{
    /// <summary>The charter.</summary>
    public required Charter Charter { get; init; }

    /// <summary>The as-of, in microseconds since 1970-01-01T00:00:00Z.</summary>
    public required long AsOf { get; init; }

    /// <summary>The newest event time used; null where there is none.</summary>
    public required long? Newest { get; init; }

    /// <summary>What became of the records.</summary>
    public required ShardCounts Counts { get; init; }

    /// <summary>Every reading of the tick, numbers not yet withheld.</summary>
    public required IReadOnlyList<Reading> Readings { get; init; }

    /// <summary>The sums of every window, all slices together, in the order of the readings.</summary>
    public required IReadOnlyList<WindowSums> Windows { get; init; }

    /// <summary>The sums of each slice, by window.</summary>
    public required IReadOnlyList<WindowSums> Slices { get; init; }

    /// <summary>The sums of the baseline that a window is compared with; null where there is none.</summary>
    public required Func<string, WindowSums?> BaselineOf { get; init; }
}
