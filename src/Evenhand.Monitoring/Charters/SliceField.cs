namespace Evenhand.Monitoring.Charters;

/// <summary>A field for whose values sums are kept apart, such as the deciding model's version.</summary>
/// <param name="Name">The slice's name.</param>
/// <param name="At">The place.</param>
/// <param name="Values">The values to keep apart; null means the first <see cref="MaximumValues"/> that appear, in order of appearance.</param>
public sealed record SliceField(string Name, FieldPath At, IReadOnlyList<string>? Values)
{
    /// <summary>Most values kept apart; what comes after goes to <see cref="OtherValue"/>.</summary>
    public const int MaximumValues = 8;

    /// <summary>The name of the slice of all further values.</summary>
    public const string OtherValue = "(other)";

    /// <summary>The name of the slice of records without a value.</summary>
    public const string MissingValue = "(missing)";
}
