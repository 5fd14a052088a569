using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads <c>labels</c>: free keys that travel along, and the feed of group labels under reserved keys.</summary>
internal sealed class LabelReader(CharterFiles files)
{
    private static readonly CharterDuration DefaultWait = new("10m", TimeSpan.FromMinutes(10));

    /// <summary>The free labels of a mapping; reserved keys of its shape are left out.</summary>
    public static Dictionary<string, string> Free(MapReader? map)
    {
        var labels = new Dictionary<string, string>(StringComparer.Ordinal);
        foreach (string key in map?.FreeKeys ?? [])
        {
            if (key.Length == 0 || key.Any(char.IsControl))
            {
                map!.Report(key, "is no usable name for a label", "write a name such as team");
            }
            else if (map!.Find(key)!.Text("write a single value") is { } text)
            {
                labels.Add(key, text);
            }
        }

        return labels;
    }

    /// <summary>The feed of group labels, or null where no reserved key is given.</summary>
    public LabelFeed? Feed(MapReader? map, CharterDraft draft)
    {
        List<string> given = [.. CharterShapes.Labels.Keys.Where(k => map?.Has(k) == true)];
        if (given.Count == 0)
        {
            return null;
        }

        if (map!.Has("topic") == map.Has("file"))
        {
            map.Report(
                given[0],
                map.Has("topic") ? "stands beside file" : "describes a feed of group labels that names no source",
                "give a topic or a file, not both; topic, file, at, join and wait are no free labels");
        }

        string? topic = TextValue.Read(map.Find("topic"), "name the topic");
        string? file = files.Read(map.Find("file"), "labels.ndjson");
        FieldPath? join = PathValue.Read(map.Require("join", "say where the decision's id stands, such as join: /case"));
        CharterDuration wait = DurationValue.Read(map.Find("wait"), "10m") ?? DefaultWait;
        IReadOnlyDictionary<string, FieldPath> at = Places(map, draft);
        return join is null ? null : new(topic, file, at, join, wait);
    }

    private static Dictionary<string, FieldPath> Places(MapReader map, CharterDraft draft)
    {
        var places = new Dictionary<string, FieldPath>(StringComparer.Ordinal);
        KeyedNode? node = map.Require("at", "say where each group's label stands, such as at: { language: /language }");
        if (node?.Node is not MapNode)
        {
            OnlyGroup(node, draft, places);
            return places;
        }

        MapReader byGroup = node.Map(CharterShapes.Free, "")!;
        foreach (string group in byGroup.FreeKeys)
        {
            if (draft.Groups is not null && draft.Group(group) is null)
            {
                byGroup.Report(group, "is no group", NearestName.Suggest(group, draft.Groups.Select(g => g.Value.Name), "name a group"));
            }

            if (PathValue.Read(byGroup.Find(group)) is { } place)
            {
                places.Add(group, place);
            }
        }

        if (byGroup.FreeKeys.Count == 0)
        {
            node.Report("names no group", "write a mapping such as { language: /language }");
        }

        return places;
    }

    private static void OnlyGroup(KeyedNode? node, CharterDraft draft, Dictionary<string, FieldPath> places)
    {
        FieldPath? place = PathValue.Read(node);
        if (place is null || draft.Groups is null)
        {
            return;
        }

        if (draft.Groups.Count == 1)
        {
            places.Add(draft.Groups[0].Value.Name, place);
        }
        else
        {
            node!.Report(
                FormattableString.Invariant($"is one place for {draft.Groups.Count} groups"),
                "write a mapping from groups to places, such as { language: /language }");
        }
    }
}
