using System.Globalization;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads lists of mappings.</summary>
internal static class DraftedList
{
    /// <summary>The entries that are mappings; null if the key is absent or no list.</summary>
    /// <param name="node">The list's node, or null.</param>
    /// <param name="shape">The keys of an entry.</param>
    /// <param name="most">Most entries.</param>
    /// <param name="example">An entry as one would write it.</param>
    /// <param name="read">Reads one entry.</param>
    public static List<Drafted<T>>? Read<T>(KeyedNode? node, KeyShape shape, int most, string example, Func<MapReader, T> read)
    {
        IReadOnlyList<KeyedNode>? items = node?.List($"write a list of mappings such as {example}");
        if (items is null)
        {
            return null;
        }

        if (items.Count > most)
        {
            node!.Report(
                string.Create(CultureInfo.InvariantCulture, $"has {items.Count} entries"),
                string.Create(CultureInfo.InvariantCulture, $"keep at most {most:N0}"));
        }

        var parts = new List<Drafted<T>>();
        foreach (KeyedNode item in items)
        {
            int before = item.Problems.Count;
            if (item.Map(shape, $"write a mapping such as {example}") is { } map)
            {
                parts.Add(Drafted<T>.Read(map, before, read));
            }
        }

        return parts;
    }
}
