using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads declared error rates of the outcome: one mapping, or a list with one for each grouping.</summary>
internal static class OutcomeNoiseReader
{
    private const string Example = "{ false_positive: 0.02, false_negative: 0.05 }";
    private const string RateMend = "write a share from 0 up to but not including 1, such as 0.05";

    /// <summary>The declarations, none where the key is absent.</summary>
    public static List<Drafted<OutcomeNoise>> Read(KeyedNode? node)
    {
        if (node?.Node is MapNode)
        {
            int before = node.Problems.Count;
            return [Drafted<OutcomeNoise>.Read(node.Map(CharterShapes.OutcomeNoise, "")!, before, One)];
        }

        return DraftedList.Read(node, CharterShapes.OutcomeNoise, CharterLimits.Fields, Example, One) ?? [];
    }

    private static OutcomeNoise One(MapReader map)
    {
        string? grouping = TextValue.Read(map.Find("grouping"), "name a group, such as grouping: language");
        if (!map.Has("false_positive") && !map.Has("false_negative"))
        {
            map.ReportWhole("declares no error rate", "add false_positive, false_negative or both");
        }

        return new(grouping, Rates(map, "false_positive"), Rates(map, "false_negative"));
    }

    private static Dictionary<string, double> Rates(MapReader map, string key)
    {
        var rates = new Dictionary<string, double>(StringComparer.Ordinal);
        KeyedNode? node = map.Find(key);
        if (node?.Node is not MapNode)
        {
            Add(rates, "*", node);
            return rates;
        }

        if (!map.Has("grouping"))
        {
            map.Report(key, "gives rates by group without a grouping", "add grouping, or write one number");
        }

        MapReader byGroup = node.Map(CharterShapes.Free, "")!;
        foreach (string group in byGroup.FreeKeys)
        {
            Add(rates, group, byGroup.Find(group));
        }

        return rates;
    }

    private static void Add(Dictionary<string, double> rates, string group, KeyedNode? node)
    {
        if (NumberValue.Read(node, v => v is >= 0 and < 1, "in [0, 1)", RateMend) is { } rate)
        {
            rates.Add(group, rate);
        }
    }
}
