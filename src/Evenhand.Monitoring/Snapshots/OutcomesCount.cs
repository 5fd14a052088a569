namespace Evenhand.Monitoring.Snapshots;

/// <summary>What became of the records of an outcomes file; <see cref="Read"/> is the sum of the others.</summary>
/// <remarks>Where an id was decided more than once, an outcome is counted by the first decision that it is found for.</remarks>
/// <param name="Read">Records read.</param>
/// <param name="Matched">Outcomes that found their decision and count.</param>
/// <param name="Unmatched">Outcomes whose decision was not among the records used.</param>
/// <param name="Outside">Outcomes before the decision or later than the charter's <c>within</c>.</param>
/// <param name="Excluded">Outcomes of a decision used that came at or after the as-of.</param>
/// <param name="Duplicate">Outcomes of an id that had one already.</param>
/// <param name="Rejected">Records that could not be read.</param>
public sealed record OutcomesCount(long Read, long Matched, long Unmatched, long Outside, long Excluded, long Duplicate, long Rejected);
