namespace Evenhand.Monitoring.Charters;

/// <summary>The decision: which texts are favourable, unfavourable or neither.</summary>
/// <param name="At">The place.</param>
/// <param name="Favourable">At least one text.</param>
/// <param name="Unfavourable">At least one text.</param>
/// <param name="Other">Texts that are counted but stand outside all rates, such as a withdrawal.</param>
public sealed record DecisionField(
    FieldPath At,
    IReadOnlyList<string> Favourable,
    IReadOnlyList<string> Unfavourable,
    IReadOnlyList<string> Other);
