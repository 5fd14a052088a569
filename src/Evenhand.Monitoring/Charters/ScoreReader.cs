namespace Evenhand.Monitoring.Charters;

/// <summary>Reads the score behind the decision.</summary>
internal static class ScoreReader
{
    private const string RangeMend = "write the least and the greatest possible score, such as [0, 1]";

    /// <summary>The score, or null.</summary>
    public static ScoreField? Read(KeyedNode? node)
    {
        MapReader? map = node?.Map(CharterShapes.Score, "write a mapping such as { at: /score, range: [0, 1] }");
        if (map is null)
        {
            return null;
        }

        FieldPath? at = PathValue.Read(map.Require("at", "say where the score stands, such as at: /score"));
        (double low, double high) = Range(map.Find("range"));
        return at is null ? null : new(at, low, high);
    }

    private static (double Low, double High) Range(KeyedNode? node)
    {
        IReadOnlyList<KeyedNode>? ends = node?.List(RangeMend);
        if (ends is null)
        {
            return (0, 1);
        }

        if (ends.Count != 2)
        {
            node!.Report(FormattableString.Invariant($"has {ends.Count} entries"), RangeMend);
            return (0, 1);
        }

        double? low = NumberValue.Read(ends[0], RangeMend);
        double? high = NumberValue.Read(ends[1], RangeMend);
        if (low >= high)
        {
            node!.Report("does not go from a lower to a higher number", RangeMend);
        }

        return (low ?? 0, high ?? 1);
    }
}
