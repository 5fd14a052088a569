namespace Evenhand.Monitoring.Charters;

/// <summary>Reads the fields whose codes make the strata of adjusted measures.</summary>
internal static class AdjustReader
{
    private const string Example = "{ field: tenure, why: \"rules differ by tenure by law\" }";

    /// <summary>The fields.</summary>
    public static List<Drafted<AdjustField>> Read(KeyedNode? node) =>
        DraftedList.Read(node, CharterShapes.Adjust, CharterLimits.Fields, Example, One) ?? [];

    private static AdjustField One(MapReader map) => new(
        TextValue.Read(map.Require("field", "name a group or an input, such as field: tenure"), "name a group or an input") ?? "",
        TextValue.Read(map.Find("why"), "give the reason as text"));
}
