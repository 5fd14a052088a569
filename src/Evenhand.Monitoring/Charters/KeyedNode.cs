using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>A node with the path of its key and the place to report what is wrong with it.</summary>
internal sealed record KeyedNode(SourceNode Node, string Key, CharterProblems Problems)
{
    /// <summary>Reports a problem at the node.</summary>
    public void Report(string wrong, string mend) => Problems.Report(Node.Line, Node.Column, Key, wrong, mend);

    /// <summary>The node's text, or null after reporting that it is no single value.</summary>
    public string? Text(string mend)
    {
        switch (Node)
        {
            case ScalarNode { IsNull: false } scalar:
                return scalar.Text;
            case RefusedNode:
                return null;
            default:
                ReportKind(mend);
                return null;
        }
    }

    /// <summary>The text of an unquoted value, or null after reporting what else it is.</summary>
    public string? PlainText(string mend)
    {
        string? text = Text(mend);
        if (text is not null && Node is ScalarNode { IsPlain: false })
        {
            Report($"is the text {QuotedText.Of(text)}", $"{mend}, without quotation marks");
            return null;
        }

        return text;
    }

    /// <summary>The entries of a list, or null after reporting that it is none.</summary>
    public IReadOnlyList<KeyedNode>? List(string mend)
    {
        if (Node is ListNode list)
        {
            return [.. list.Items.Select((item, i) => new KeyedNode(item, FormattableString.Invariant($"{Key}[{i}]"), Problems))];
        }

        ReportKind(mend);
        return null;
    }

    /// <summary>The mapping, or null after reporting that it is none.</summary>
    public MapReader? Map(KeyShape shape, string mend)
    {
        if (Node is MapNode map)
        {
            return new MapReader(map, Key, shape, Problems);
        }

        ReportKind(mend);
        return null;
    }

    private void ReportKind(string mend)
    {
        if (Node is not RefusedNode)
        {
            Report($"is {Node.Kind}", mend);
        }
    }
}
