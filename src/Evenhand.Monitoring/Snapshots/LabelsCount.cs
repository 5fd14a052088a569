namespace Evenhand.Monitoring.Snapshots;

/// <summary>What became of a feed of labels, and of the decisions that lacked labels.</summary>
/// <param name="Read">Entries read; kept, duplicate and rejected ones together.</param>
/// <param name="Kept">Entries by which decisions are looked up.</param>
/// <param name="Duplicate">Entries whose id had one already.</param>
/// <param name="Rejected">Entries that could not be read.</param>
/// <param name="Filled">Decisions that took a label that they lacked.</param>
/// <param name="Late">Decisions whose label came later than <c>wait</c> allows, or was not known yet at the as-of.</param>
public sealed record LabelsCount(long Read, long Kept, long Duplicate, long Rejected, long Filled, long Late);
