namespace Evenhand.Monitoring.Charters;

/// <summary>Reads which groups are crossed.</summary>
internal static class IntersectionReader
{
    private const string Mend = "write a list of lists of group names, such as [[language, age]]";

    /// <summary>The intersections that could be read, by names of groups.</summary>
    public static List<(IReadOnlyList<string> Names, KeyedNode At)> Read(KeyedNode? node)
    {
        var crossed = new List<(IReadOnlyList<string>, KeyedNode)>();
        IReadOnlyList<KeyedNode> items = node?.List(Mend) ?? [];
        foreach (KeyedNode item in items)
        {
            IReadOnlyList<KeyedNode>? names = item.List(Mend);
            if (names is null)
            {
                continue;
            }

            if (names.Count is < 2 or > CharterLimits.CrossedGroups)
            {
                item.Report(
                    FormattableString.Invariant($"has {names.Count} entries"),
                    FormattableString.Invariant($"name 2 to {CharterLimits.CrossedGroups} groups"));
                continue;
            }

            List<string> read = [.. names.Select(n => n.Text("write a group's name")).OfType<string>()];
            if (read.Count == names.Count)
            {
                crossed.Add((read, item));
            }
        }

        if (items.Count > CharterLimits.Intersections)
        {
            node!.Report(
                FormattableString.Invariant($"has {items.Count} entries"),
                FormattableString.Invariant($"keep at most {CharterLimits.Intersections}"));
        }

        return crossed;
    }
}
