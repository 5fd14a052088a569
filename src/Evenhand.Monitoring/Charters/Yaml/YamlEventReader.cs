using YamlDotNet.Core;
using YamlDotNet.Core.Events;

namespace Evenhand.Monitoring.Charters.Yaml;

/// <summary>Builds nodes from parser events; refuses what a plain settings file never needs.</summary>
/// <remarks>
/// Anchors, aliases and tags are refused, so no document is larger in memory than a small multiple of its text.
/// </remarks>
internal sealed class YamlEventReader
{
    private readonly Parser _parser;
    private readonly List<YamlFault> _faults = [];

    /// <summary>Reads from the start of a text.</summary>
    public YamlEventReader(string text) => _parser = new Parser(new Scanner(new StringReader(text), skipComments: true));

    /// <summary>What was refused so far.</summary>
    public IReadOnlyList<YamlFault> Faults => _faults;

    /// <summary>Line of the last event.</summary>
    public int LastLine { get; private set; } = 1;

    /// <summary>Column of the last event.</summary>
    public int LastColumn { get; private set; } = 1;

    /// <summary>The only document's root, or null where there is none.</summary>
    public SourceNode? ReadDocument()
    {
        Next<StreamStart>();
        if (Peek() is StreamEnd)
        {
            return null;
        }

        Next<DocumentStart>();
        SourceNode root = ReadNode(0);
        Next<DocumentEnd>();
        if (Peek() is DocumentStart second)
        {
            Refuse(second, "begins a second document", "keep one charter a file");
        }

        return root;
    }

    private SourceNode ReadNode(int depth)
    {
        ParsingEvent head = Peek();
        if (depth > YamlDocument.MaximumDepth)
        {
            throw new YamlException(head.Start, head.End, $"nested deeper than {YamlDocument.MaximumDepth} levels");
        }

        RefuseMarks(head);
        return head switch
        {
            AnchorAlias => ReadAlias(),
            Scalar => ReadScalar(),
            SequenceStart => ReadList(depth),
            MappingStart => ReadMap(depth),
            _ => throw new YamlException(head.Start, head.End, "a value was expected"),
        };
    }

    private RefusedNode ReadAlias()
    {
        AnchorAlias alias = Next<AnchorAlias>();
        Refuse(alias, $"refers to another place by {QuotedText.Of("*" + alias.Value.Value)}", "write the value out; aliases are not read");
        return new(LastLine, LastColumn);
    }

    private ScalarNode ReadScalar()
    {
        Scalar scalar = Next<Scalar>();
        return new(LastLine, LastColumn, scalar.Value, scalar.Style == ScalarStyle.Plain);
    }

    private ListNode ReadList(int depth)
    {
        Next<SequenceStart>();
        (int line, int column) = (LastLine, LastColumn);
        var items = new List<SourceNode>();
        while (Peek() is not SequenceEnd)
        {
            items.Add(ReadNode(depth + 1));
        }

        Next<SequenceEnd>();
        return new(line, column, items);
    }

    private MapNode ReadMap(int depth)
    {
        Next<MappingStart>();
        (int line, int column) = (LastLine, LastColumn);
        var pairs = new List<(ScalarNode, SourceNode)>();
        while (Peek() is not MappingEnd)
        {
            SourceNode key = ReadNode(depth + 1);
            SourceNode value = ReadNode(depth + 1);
            if (key is ScalarNode name)
            {
                pairs.Add((name, value));
            }
            else if (key is not RefusedNode)
            {
                _faults.Add(new(key.Line, key.Column, $"has {key.Kind} for a key", "write a name before the colon"));
            }
        }

        Next<MappingEnd>();
        return new(line, column, pairs);
    }

    private void RefuseMarks(ParsingEvent head)
    {
        if (head is not NodeEvent node || head is AnchorAlias)
        {
            return;
        }

        if (!node.Anchor.IsEmpty)
        {
            Refuse(head, $"carries the anchor {QuotedText.Of("&" + node.Anchor.Value)}", "remove it; anchors are not read");
        }

        if (!node.Tag.IsEmpty && !node.Tag.IsNonSpecific)
        {
            Refuse(head, $"carries the tag {QuotedText.Of(node.Tag.Value)}", "remove it; tags are not read");
        }
    }

    private void Refuse(ParsingEvent at, string wrong, string mend) =>
        _faults.Add(new((int)at.Start.Line, (int)at.Start.Column, wrong, mend));

    private ParsingEvent Peek()
    {
        if (_parser.Current is null && !_parser.MoveNext())
        {
            throw new InvalidOperationException("The stream of events ended early.");
        }

        return _parser.Current!;
    }

    private T Next<T>()
        where T : ParsingEvent
    {
        ParsingEvent current = Peek();
        LastLine = (int)current.Start.Line;
        LastColumn = (int)current.Start.Column;
        if (current is not T expected)
        {
            throw new YamlException(current.Start, current.End, "something else was expected");
        }

        _parser.MoveNext();
        return expected;
    }
}
