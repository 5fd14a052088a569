namespace Evenhand.Monitoring.Charters;

/// <summary>Reads the fields for whose values sums are kept apart.</summary>
internal static class SliceReader
{
    private const string Example = "{ name: version, at: /policy/version }";

    /// <summary>The slices.</summary>
    public static List<Drafted<SliceField>> Read(KeyedNode? node) =>
        DraftedList.Read(node, CharterShapes.Slice, CharterLimits.Slices, Example, One) ?? [];

    private static SliceField One(MapReader map)
    {
        string? name = TextValue.Name(map.Require("name", "name the slice, such as name: version"), ofField: true);
        FieldPath? at = PathValue.Read(map.Require("at", "say where the value stands, such as at: /policy/version"));
        IReadOnlyList<string>? values = TextListValue.Listed(map.Find("values"), 1, "[\"3.1\", \"3.2\"]");
        if (values?.Count > SliceField.MaximumValues)
        {
            map.Report(
                "values",
                FormattableString.Invariant($"lists {values.Count} values"),
                FormattableString.Invariant($"keep at most {SliceField.MaximumValues}; all others are counted as {SliceField.OtherValue}"));
        }

        return new(name ?? "", at ?? new FieldPath([]), values);
    }
}
