using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>One mapping of a charter: refuses unknown, repeated and empty keys, then hands out the rest.</summary>
internal sealed class MapReader
{
    private readonly MapNode _node;
    private readonly string _path;
    private readonly KeyShape _shape;
    private readonly CharterProblems _problems;
    private readonly Dictionary<string, KeyedNode> _values = new(StringComparer.Ordinal);
    private readonly List<string> _freeKeys = [];

    /// <summary>Takes the keys of a mapping.</summary>
    /// <param name="node">The mapping.</param>
    /// <param name="path">Its path; empty for the whole charter.</param>
    /// <param name="shape">The keys it may have.</param>
    /// <param name="problems">Where problems go.</param>
    public MapReader(MapNode node, string path, KeyShape shape, CharterProblems problems)
    {
        (_node, _path, _shape, _problems) = (node, path, shape, problems);
        var lines = new Dictionary<string, int>(StringComparer.Ordinal);
        foreach ((ScalarNode key, SourceNode value) in node.Pairs)
        {
            if (lines.TryGetValue(key.Text, out int first))
            {
                problems.Report(key.Line, key.Column, PathOf(key.Text), $"is given twice, first on line {first}", "keep one of the two");
                continue;
            }

            lines.Add(key.Text, key.Line);
            Take(key, value);
        }
    }

    /// <summary>Keys beyond the known ones, in order; empty unless the shape takes free keys.</summary>
    public IReadOnlyList<string> FreeKeys => _freeKeys;

    /// <summary>The mapping's line.</summary>
    public int Line => _node.Line;

    /// <summary>Number of problems found so far in the whole file.</summary>
    public int ProblemCount => _problems.Count;

    /// <summary>Whether the key is there, be its value right or wrong.</summary>
    public bool Has(string key) => _values.ContainsKey(key);

    /// <summary>The value of a key, or null where the key is absent.</summary>
    public KeyedNode? Find(string key) => _values.GetValueOrDefault(key);

    /// <summary>The value of a key; its absence is reported at the mapping.</summary>
    public KeyedNode? Require(string key, string mend)
    {
        KeyedNode? value = Find(key);
        if (value is null)
        {
            Report(key, "is missing", mend);
        }

        return value;
    }

    /// <summary>Reports a problem at a key's value, or at the mapping where the key is absent.</summary>
    public void Report(string key, string wrong, string mend)
    {
        SourceNode at = Find(key)?.Node ?? _node;
        _problems.Report(at.Line, at.Column, PathOf(key), wrong, mend);
    }

    /// <summary>Reports a problem of the mapping as a whole.</summary>
    public void ReportWhole(string wrong, string mend) =>
        _problems.Report(_node.Line, _node.Column, _path.Length == 0 ? "charter" : _path, wrong, mend);

    private string PathOf(string key)
    {
        string shown = QuotedText.OneLine(key);
        return _path.Length == 0 ? shown : $"{_path}.{shown}";
    }

    private void Take(ScalarNode key, SourceNode value)
    {
        string path = PathOf(key.Text);
        bool known = _shape.Keys.Contains(key.Text, StringComparer.Ordinal);
        if (!known && !_shape.TakesFreeKeys)
        {
            _problems.Report(key.Line, key.Column, path, "is no key here", UnknownKeyMend(key.Text));
            return;
        }

        if (value.IsNull)
        {
            _problems.Report(value.Line, value.Column, path, "has no value", "give one, or remove the key");
            value = new RefusedNode(value.Line, value.Column);
        }

        _values.Add(key.Text, new KeyedNode(value, path, _problems));
        if (!known)
        {
            _freeKeys.Add(key.Text);
        }
    }

    private string UnknownKeyMend(string key) =>
        $"the nearest known key is {NearestName.Of(key, _shape.Keys)}; correct the name or remove the key";
}
