using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Checks that lists of one mapping have no text in common.</summary>
internal static class DisjointLists
{
    /// <summary>Reports each text of a later list that an earlier one has.</summary>
    public static void Check(MapReader map, IReadOnlyList<string> keys, IReadOnlyList<IReadOnlyList<string>?> lists)
    {
        var owners = new Dictionary<string, string>(StringComparer.Ordinal);
        for (int i = 0; i < keys.Count; i++)
        {
            foreach (string text in lists[i] ?? [])
            {
                if (!owners.TryAdd(text, keys[i]))
                {
                    map.Report(keys[i], $"{QuotedText.Of(text)} is listed under {owners[text]} too", "keep it in one of the two lists");
                }
            }
        }
    }
}
