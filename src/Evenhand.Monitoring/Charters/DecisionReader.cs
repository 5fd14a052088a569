namespace Evenhand.Monitoring.Charters;

/// <summary>Reads the decision and checks that no text decides twice.</summary>
internal static class DecisionReader
{
    private const string Example = "{ at: /decision, favourable: [granted], unfavourable: [refused] }";
    private static readonly string[] Lists = ["favourable", "unfavourable", "other"];

    /// <summary>The decision, or null.</summary>
    public static DecisionField? Read(KeyedNode? node)
    {
        MapReader? map = node?.Map(CharterShapes.Decision, $"write a mapping such as {Example}");
        if (map is null)
        {
            return null;
        }

        FieldPath? at = PathValue.Read(map.Require("at", "say where the decision stands, such as at: /decision"));
        IReadOnlyList<string>? favourable = TextListValue.Listed(
            map.Require("favourable", "list the texts of a favourable decision, such as [granted]"), 1, "[granted]");
        IReadOnlyList<string>? unfavourable = TextListValue.Listed(
            map.Require("unfavourable", "list the texts of an unfavourable decision, such as [refused]"), 1, "[refused]");
        IReadOnlyList<string>? other = TextListValue.Listed(map.Find("other"), 0, "[withdrawn]");
        DisjointLists.Check(map, Lists, [favourable, unfavourable, other]);
        return at is null || favourable is null || unfavourable is null ? null : new(at, favourable, unfavourable, other ?? []);
    }
}
