namespace Evenhand.Monitoring.Charters;

/// <summary>A field by which people are grouped, such as household language or age band.</summary>
public sealed record GroupField : CodedField
{
    /// <summary>The code of the reference group, or null where the charter names none.</summary>
    public int? Reference { get; init; }

    /// <summary>Per listed value, where an external estimate of its probability stands in the record; null unless given.</summary>
    public IReadOnlyDictionary<string, FieldPath>? Probabilities { get; init; }

    /// <summary>Per listed value, the prior that the external estimates were made under; null unless given.</summary>
    public IReadOnlyDictionary<string, double>? Prior { get; init; }
}
