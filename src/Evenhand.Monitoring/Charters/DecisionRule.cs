namespace Evenhand.Monitoring.Charters;

/// <summary>The deciding model, where it is known.</summary>
/// <param name="Format">The file's notation.</param>
/// <param name="File">File name relative to the charter.</param>
/// <param name="AtLeast">Favourable from this output upward; null unless used.</param>
/// <param name="AtMost">Favourable up to this output; null unless used.</param>
/// <param name="Favourable">Favourable output classes; null unless used.</param>
/// <param name="Fields">Name in the rule file to name of an input; names that are alike need no entry.</param>
/// <param name="Version">The value of the version slice that this rule decided; null where one rule serves all.</param>
public sealed record DecisionRule(
    RuleFormat Format,
    string File,
    double? AtLeast,
    double? AtMost,
    IReadOnlyList<string>? Favourable,
    IReadOnlyDictionary<string, string> Fields,
    string? Version);
