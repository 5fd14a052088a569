using System.Globalization;
using System.Text;

namespace Evenhand.Monitoring.Records;

/// <summary>The places of a charter as a tree of keys, so that a record is read once whatever the number of places.</summary>
/// <remarks>
/// A place with a leading slash is a JSON Pointer (RFC 6901); one without names a top-level member as it stands.
/// Node 0 is the record itself.
/// </remarks>
internal sealed class PathTrie
{
    private readonly List<PathNode> _nodes = [new PathNode()];

    public PathTrie(IReadOnlyList<string> places)
    {
        for (int slot = 0; slot < places.Count; slot++)
        {
            int node = 0;
            foreach (string token in TokensOf(places[slot]))
            {
                node = ChildOf(node, token);
            }

            _nodes[node].Slot = slot;
        }

        Nodes = [.. _nodes];
    }

    /// <summary>All nodes.</summary>
    public PathNode[] Nodes { get; }

    private static IEnumerable<string> TokensOf(string place) => place.StartsWith('/')
        ? place[1..].Split('/').Select(token => token.Replace("~1", "/", StringComparison.Ordinal).Replace("~0", "~", StringComparison.Ordinal))
        : [place];

    private int ChildOf(int parent, string token)
    {
        PathNode node = _nodes[parent];
        byte[] name = Encoding.UTF8.GetBytes(token);
        int child = node.Names.Find(name);
        if (child != TextTable.None)
        {
            return child;
        }

        child = _nodes.Count;
        _nodes.Add(new PathNode());
        node.Names.Add(name, child);
        if (int.TryParse(token, NumberStyles.None, CultureInfo.InvariantCulture, out int index)
            && (token.Length == 1 || token[0] != '0'))
        {
            node.Elements.Add((index, child));
            node.Elements.Sort();
        }

        return child;
    }
}
