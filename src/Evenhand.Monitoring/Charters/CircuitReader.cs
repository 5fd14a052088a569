using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads how the circuit is learnt.</summary>
internal sealed class CircuitReader(CharterFiles files, CharterUse use)
{
    private const int LeastWarmUp = 100;
    private const int MostProfiles = 256;

    /// <summary>The plan, or null.</summary>
    public CircuitPlan? Read(KeyedNode? node)
    {
        MapReader? map = node?.Map(CharterShapes.Circuit, "write a mapping such as { profiles: 16, sample: sample.ndjson }");
        if (map is null)
        {
            return null;
        }

        bool either = map.Has("sample") || map.Has("warm_up");
        if (either || use == CharterUse.Monitoring)
        {
            CodedFieldReader.ExactlyOne(map, "sample", "warm_up");
        }

        var plan = new CircuitPlan();
        return plan with
        {
            Profiles = Profiles(map.Find("profiles"), plan.Profiles),
            Sample = files.Read(map.Find("sample"), "sample.ndjson"),
            WarmUp = NumberValue.Whole(map.Find("warm_up"), LeastWarmUp, long.MaxValue, "20000"),
            Window = DurationValue.Read(map.Find("window"), "30d") ?? plan.Window,
            PriorRecords = NumberValue.Read(
                map.Find("prior_records"), v => v >= 0, "at least 0", "write how many records the sample is worth, such as 2000"),
        };
    }

    private static int? Profiles(KeyedNode? node, int? otherwise)
    {
        if (node?.Node is ScalarNode { Text: "auto" })
        {
            return null;
        }

        if (node?.Node is ScalarNode { IsNull: false } scalar && !long.TryParse(scalar.Text, out _))
        {
            node.Report($"{QuotedText.Of(scalar.Text)} is no number of profiles", "write a whole number from 1 to 256, or auto");
            return otherwise;
        }

        return (int?)NumberValue.Whole(node, 1, MostProfiles, "16") ?? otherwise;
    }
}
