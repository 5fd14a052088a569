namespace Evenhand.Monitoring.Charters;

/// <summary>A measure that readings may carry and alert rules may name.</summary>
/// <param name="Name">The name in charters, readings and metrics.</param>
/// <param name="Scale">What kind of number it is.</param>
/// <param name="Needs">What it needs from the charter.</param>
/// <param name="ComparesGroups">Whether it sets a group beside the reference, so that a rule needs a grouping and a named reference.</param>
/// <param name="CanBeModelled">Whether it is read on the modelled basis too.</param>
/// <param name="CanShift">Whether a rule may judge its shift against the baseline.</param>
/// <param name="Meaning">One line for people.</param>
public sealed record MeasureDefinition(
    string Name,
    MeasureScale Scale,
    MeasureNeeds Needs,
    bool ComparesGroups,
    bool CanBeModelled,
    bool CanShift,
    string Meaning)
{
    /// <summary>Whether it is a ratio of a group to the reference.</summary>
    public bool IsRatio => Scale == MeasureScale.Ratio;

    /// <summary>Whether it is a difference of a group and the reference, by its name.</summary>
    public bool IsGap => Name.EndsWith("_gap", StringComparison.Ordinal);

    /// <summary>Whether it is a share, or a difference of shares.</summary>
    public bool IsShare => Scale is MeasureScale.Rate or MeasureScale.RateGap;
}
