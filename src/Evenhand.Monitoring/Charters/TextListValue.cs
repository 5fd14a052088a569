using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads lists of texts that records are compared with.</summary>
internal static class TextListValue
{
    /// <summary>Texts that mean something: at least <paramref name="least"/>, none empty, each once. Null if anything is wrong.</summary>
    public static IReadOnlyList<string>? Listed(KeyedNode? node, int least, string example)
    {
        List<string>? texts = Read(node, example, Item);
        if (texts is not null && texts.Count < least)
        {
            node!.Report(
                texts.Count == 0 ? "lists nothing" : $"lists only {texts.Count} of at least {least} values",
                $"write a list such as {example}");
            return null;
        }

        return texts;
    }

    /// <summary>Texts that mean missing: the empty text and null may stand among them though they always do.</summary>
    public static IReadOnlyList<string>? Missing(KeyedNode? node) => Read(node, "[unknown]", MissingItem);

    private static List<string>? Read(KeyedNode? node, string example, Func<KeyedNode, string?> read)
    {
        IReadOnlyList<KeyedNode>? items = node?.List($"write a list such as {example}");
        if (items is null)
        {
            return null;
        }

        int before = node!.Problems.Count;
        var seen = new HashSet<string>(StringComparer.Ordinal);
        var texts = new List<string>(items.Count);
        foreach (KeyedNode item in items)
        {
            if (read(item) is { } text)
            {
                Add(text, item, seen, texts);
            }
        }

        return node.Problems.Count == before ? texts : null;
    }

    private static void Add(string text, KeyedNode item, HashSet<string> seen, List<string> texts)
    {
        if (seen.Add(text))
        {
            texts.Add(text);
        }
        else
        {
            item.Report($"{QuotedText.Of(text)} is listed twice", "keep one of the two");
        }
    }

    private static string? Item(KeyedNode item)
    {
        if (item.Node.IsNull)
        {
            item.Report("is null, which always means missing", "remove it, or quote it if the text itself is meant");
            return null;
        }

        string? text = item.Text("write a single value");
        if (text is { Length: 0 })
        {
            item.Report("is empty, which always means missing", "remove it");
            return null;
        }

        return text;
    }

    private static string? MissingItem(KeyedNode item) => item.Node.IsNull ? "" : item.Text("write a single value");
}
