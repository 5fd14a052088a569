using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Checks whom an alert rule judges: its grouping, group and reference.</summary>
internal static class AlertGroupValidator
{
    /// <summary>Checks one rule.</summary>
    public static void Check(CharterDraft draft, Drafted<AlertDraft> alert, MeasureDefinition measure)
    {
        AlertRule rule = alert.Value.Rule;
        if (!alert.Map.Has("grouping"))
        {
            if (measure.ComparesGroups)
            {
                alert.Map.Report("grouping", "is missing", $"name the groups that {measure.Name} compares, such as grouping: language");
            }
            else if (alert.Map.Has("group"))
            {
                alert.Map.Report("group", "is given without a grouping", "add grouping");
            }

            return;
        }

        if (rule.Grouping is null || draft.Groups is null)
        {
            return;
        }

        if (draft.Grouping(rule.Grouping) is not { } groups)
        {
            alert.Map.Report(
                "grouping",
                $"{QuotedText.Of(rule.Grouping)} is no group or intersection",
                GroupingMend(draft, rule.Grouping));
        }
        else if (groups.All(g => g.IsSound))
        {
            Groups(alert, measure, [.. groups.Select(g => g.Value)]);
        }
    }

    private static void Groups(Drafted<AlertDraft> alert, MeasureDefinition measure, List<GroupField> groups)
    {
        List<string> without = [.. groups.Where(g => g.Reference is null).Select(g => g.Name)];
        if (measure.ComparesGroups && without.Count > 0)
        {
            alert.Map.Report(
                "grouping",
                $"{measure.Name} needs a named reference, which {string.Join(" and ", without)} lacks",
                $"add reference to the group {without[0]}");
        }

        if (alert.Value.Rule.Group is not { } text)
        {
            return;
        }

        int[]? codes = GroupLabels.Find(text, groups);
        if (codes is null)
        {
            alert.Map.Report("group", $"{QuotedText.Of(text)} is no group of {alert.Value.Rule.Grouping}", Mend(text, groups));
        }
        else if (measure.ComparesGroups && without.Count == 0 && groups.Select(g => g.Reference!.Value).SequenceEqual(codes))
        {
            alert.Map.Report("group", $"{QuotedText.Of(text)} is the reference, which is not compared with itself", "name another group, or remove the key");
        }
    }

    private static string GroupingMend(CharterDraft draft, string name)
    {
        string[] parts = name.Split('+');
        return parts.Length > 1 && parts.All(p => draft.Group(p) is not null) && !draft.Intersections.Exists(i => parts.ToHashSet().SetEquals(i.Names))
            ? $"add [{string.Join(", ", parts)}] to intersections"
            : NearestName.Suggest(name, draft.GroupingNames, "list it under groups or intersections");
    }

    private static string Mend(string text, List<GroupField> groups) => groups.Count == 1
        ? NearestName.Suggest(text, groups[0].ListedLabels(), "name one of its groups")
        : $"write it such as {string.Join('+', groups.Select(g => g.Label(0)))}";
}
