namespace Evenhand.Monitoring.Charters;

/// <summary>Group labels that come apart from the decisions, from a topic or a file.</summary>
/// <param name="Topic">The topic; null where a file serves.</param>
/// <param name="File">The file relative to the charter; null where a topic serves.</param>
/// <param name="At">Group name to its place in the label record.</param>
/// <param name="Join">Where the decision's id stands in the label record.</param>
/// <param name="Wait">How long a decision is held for its label, in event time.</param>
public sealed record LabelFeed(
    string? Topic,
    string? File,
    IReadOnlyDictionary<string, FieldPath> At,
    FieldPath Join,
    CharterDuration Wait);
