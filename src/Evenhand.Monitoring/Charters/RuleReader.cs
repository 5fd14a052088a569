using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads the deciding models: one mapping, or a list with a version each.</summary>
internal sealed class RuleReader(CharterFiles files)
{
    private const string Example = "{ pmml: fast-track.pmml, at_least: 600 }";

    /// <summary>The rules, none where the key is absent.</summary>
    public List<Drafted<DecisionRule>> Read(KeyedNode? node)
    {
        if (node?.Node is MapNode)
        {
            int before = node.Problems.Count;
            return [Drafted<DecisionRule>.Read(node.Map(CharterShapes.Rule, "")!, before, One)];
        }

        if (node?.Node is ListNode { Items.Count: 0 })
        {
            node.Report("lists nothing", $"write a mapping such as {Example}, or remove the key");
        }

        return DraftedList.Read(node, CharterShapes.Rule, CharterLimits.Fields, Example, Versioned) ?? [];
    }

    private DecisionRule Versioned(MapReader map)
    {
        map.Require("version", "say which version of the deciding model this is, such as version: \"3.2\"");
        return One(map);
    }

    private DecisionRule One(MapReader map)
    {
        CodedFieldReader.ExactlyOne(map, "pmml", "onnx");
        CodedFieldReader.ExactlyOne(map, "at_least", "at_most", "favourable");
        string? pmml = files.Read(map.Find("pmml"), "fast-track.pmml");
        string? onnx = files.Read(map.Find("onnx"), "fast-track.onnx");
        return new(
            map.Has("onnx") && !map.Has("pmml") ? RuleFormat.Onnx : RuleFormat.Pmml,
            pmml ?? onnx ?? "",
            NumberValue.Read(map.Find("at_least"), "write a number such as 600"),
            NumberValue.Read(map.Find("at_most"), "write a number such as 0.4"),
            TextListValue.Listed(map.Find("favourable"), 1, "[grant]"),
            Fields(map.Find("fields")),
            TextValue.Read(map.Find("version"), "write the version as the records have it"));
    }

    private static Dictionary<string, string> Fields(KeyedNode? node)
    {
        var fields = new Dictionary<string, string>(StringComparer.Ordinal);
        MapReader? map = node?.Map(CharterShapes.Free, "write a mapping from the rule's names to inputs, such as { dmg: damage }");
        foreach (string name in map?.FreeKeys ?? [])
        {
            if (TextValue.Read(map!.Find(name), "write an input's name") is { } input)
            {
                fields.Add(name, input);
            }
        }

        return fields;
    }
}
