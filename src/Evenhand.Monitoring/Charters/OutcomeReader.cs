namespace Evenhand.Monitoring.Charters;

/// <summary>Reads what became of the case.</summary>
internal static class OutcomeReader
{
    private const string Example = "{ at: /upheld, positive: [true], negative: [false] }";

    private static readonly CharterDuration DefaultWithin = new("30d", TimeSpan.FromDays(30));

    /// <summary>The outcome, or null.</summary>
    public static OutcomeField? Read(KeyedNode? node)
    {
        MapReader? map = node?.Map(CharterShapes.Outcome, $"write a mapping such as {Example}");
        if (map is null)
        {
            return null;
        }

        FieldPath? at = PathValue.Read(map.Require("at", "say where the outcome stands, such as at: /upheld"));
        IReadOnlyList<string>? positive = TextListValue.Listed(
            map.Require("positive", "list the texts of a positive outcome, such as [true]"), 1, "[true]");
        IReadOnlyList<string>? negative = TextListValue.Listed(
            map.Require("negative", "list the texts of a negative outcome, such as [false]"), 1, "[false]");
        DisjointLists.Check(map, ["positive", "negative"], [positive, negative]);
        CharterDuration within = DurationValue.Read(map.Find("within"), "30d") ?? DefaultWithin;
        OutcomeObservation seen = TextValue.Choice(map.Find("observed_when"), "any", "favourable") == "favourable"
            ? OutcomeObservation.Favourable
            : OutcomeObservation.Any;
        return at is null || positive is null || negative is null ? null : new(at, positive, negative, within, seen);
    }
}
