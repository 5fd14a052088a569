namespace Evenhand.Monitoring.Charters;

/// <summary>Reads the fields that the deciding model sees.</summary>
internal static class InputReader
{
    private const string Example = "{ name: tenure, at: /tenure, values: [owner, tenant, other] }";

    /// <summary>The inputs; null if the key holds no list.</summary>
    public static List<Drafted<InputField>>? Read(KeyedNode? node) =>
        node is null ? [] : DraftedList.Read(node, CharterShapes.Input, CharterLimits.Fields, Example, One);

    private static InputField One(MapReader map)
    {
        CodedFieldReader.ExactlyOne(map, "values", "bands", "quantiles");
        IReadOnlyList<string>? values = CodedFieldReader.Values(map, least: 1);
        (IReadOnlyList<string> missing, IReadOnlyList<string> declined) = CodedFieldReader.SpecialTexts(map, values);
        return new InputField
        {
            Name = CodedFieldReader.Name(map),
            At = CodedFieldReader.At(map),
            Values = values,
            Bands = CodedFieldReader.Bands(map),
            Quantiles = (int?)NumberValue.Whole(map.Find("quantiles"), 2, CharterLimits.Quantiles, "12"),
            Missing = missing,
            Declined = declined,
        };
    }
}
