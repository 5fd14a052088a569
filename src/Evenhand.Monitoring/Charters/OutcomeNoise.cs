namespace Evenhand.Monitoring.Charters;

/// <summary>Declared error rates of the recorded outcome, for one grouping's groups.</summary>
/// <param name="Grouping">Name of the group field; null means the same everywhere.</param>
/// <param name="FalsePositive">Group (or <c>*</c>) to the largest P(recorded positive | truly negative), in [0, 1).</param>
/// <param name="FalseNegative">Group (or <c>*</c>) to the largest P(recorded negative | truly positive), in [0, 1).</param>
public sealed record OutcomeNoise(
    string? Grouping,
    IReadOnlyDictionary<string, double> FalsePositive,
    IReadOnlyDictionary<string, double> FalseNegative);
