namespace Evenhand.Monitoring.Charters;

/// <summary>What became of the case later.</summary>
/// <param name="At">The place.</param>
/// <param name="Positive">Texts of a positive outcome; at least one.</param>
/// <param name="Negative">Texts of a negative outcome; at least one.</param>
/// <param name="Within">How long after the decision an outcome that comes apart from its record still counts.</param>
/// <param name="ObservedWhen">When it can be seen.</param>
public sealed record OutcomeField(
    FieldPath At,
    IReadOnlyList<string> Positive,
    IReadOnlyList<string> Negative,
    CharterDuration Within,
    OutcomeObservation ObservedWhen);
