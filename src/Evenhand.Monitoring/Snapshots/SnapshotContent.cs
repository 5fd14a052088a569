using Evenhand.Monitoring.Alerts;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>What goes into a snapshot, before hashes and its place in the chain.</summary>
public sealed record SnapshotContent
{
    /// <summary><c>scheduled</c>, <c>alert</c>, <c>manual</c>, <c>replay</c> or <c>correction</c>.</summary>
    public required string Kind { get; init; }

    /// <summary>The run's identity.</summary>
    public required string Run { get; init; }

    /// <summary>The program's version.</summary>
    public required string ProgramVersion { get; init; }

    /// <summary>The charter's sums.</summary>
    public required SumLayout Layout { get; init; }

    /// <summary>When it is written, in microseconds since 1970-01-01T00:00:00Z.</summary>
    public required long CreatedAt { get; init; }

    /// <summary>The evaluation that it states.</summary>
    public required TickResult Tick { get; init; }

    /// <summary>What became of the records.</summary>
    public required ShardCounts Counts { get; init; }

    /// <summary>How far each source has been read.</summary>
    public required IReadOnlyList<SnapshotSource> Sources { get; init; }

    /// <summary>What became of an outcomes file; null without one.</summary>
    public OutcomesCount? Outcomes { get; init; }

    /// <summary>What became of a feed of labels; null without one.</summary>
    public LabelsCount? Labels { get; init; }

    /// <summary>Ids forgotten for want of room: duplicates of these were not recognised.</summary>
    public long EvictedIds { get; init; }
}
