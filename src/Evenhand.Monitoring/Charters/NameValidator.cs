using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Checks that names are given once and that a charter has what its use needs.</summary>
internal static class NameValidator
{
    /// <summary>Checks a draft.</summary>
    public static void Check(CharterDraft draft)
    {
        Unique(draft.Fields.Select(f => (f.Value.Name, f.Map)), "group or input");
        Unique(draft.Slices.Select(s => (s.Value.Name, s.Map)), "slice");
        Unique(draft.Alerts.Select(a => (a.Value.Rule.Name, a.Map)), "alert");
        Needed(draft);
        int fields = draft.Fields.Count();
        if (fields > CharterLimits.Fields)
        {
            draft.Root.Report(
                draft.Root.Has("inputs") ? "inputs" : "groups",
                FormattableString.Invariant($"makes {fields} groups and inputs"),
                FormattableString.Invariant($"keep at most {CharterLimits.Fields} together"));
        }
    }

    private static void Unique(IEnumerable<(string Name, MapReader Map)> named, string kind)
    {
        var lines = new Dictionary<string, int>(StringComparer.Ordinal);
        foreach ((string name, MapReader map) in named)
        {
            if (name.Length > 0 && !lines.TryAdd(name, map.Line))
            {
                map.Report(
                    "name",
                    FormattableString.Invariant($"{QuotedText.Of(name)} names another {kind} too, on line {lines[name]}"),
                    "give each a name of its own");
            }
        }
    }

    private static void Needed(CharterDraft draft)
    {
        MapReader root = draft.Root;
        if (draft.Use == CharterUse.Learning)
        {
            if (draft.Groups is { Count: 0 } && draft.Inputs is { Count: 0 })
            {
                root.Report("inputs", "is missing", "list the fields to learn from under inputs or groups");
            }

            return;
        }

        root.Require("decision", "say where the decision stands and which texts are favourable and unfavourable");
        if (root.Require("groups", "list at least one field by which people are grouped") is not null && draft.Groups is { Count: 0 }
            && root.Find("groups")!.Node is ListNode { Items.Count: 0 })
        {
            root.Report("groups", "lists nothing", "list at least one field by which people are grouped");
        }
    }
}
