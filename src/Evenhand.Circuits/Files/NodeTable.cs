using System.Text.Json;
using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Files;

/// <summary>The nodes of a circuit file by their ids, put in order so that children come before parents.</summary>
internal sealed class NodeTable
{
    private static readonly string[] Keys = ["id", "variable", "p", "mean", "sd", "product", "sum", "weights"];

    private readonly Variable[] _variables;
    private readonly Dictionary<string, int> _names = [];
    private readonly Dictionary<long, JsonElement> _nodes = [];
    private readonly Dictionary<long, int> _built = [];

    /// <summary>Takes the nodes.</summary>
    public NodeTable(JsonElement nodes, Variable[] variables)
    {
        _variables = variables;
        for (int v = 0; v < variables.Length; v++)
        {
            if (!_names.TryAdd(variables[v].Name, v))
            {
                throw new CircuitException($"the variable {variables[v].Name} stands twice");
            }
        }

        foreach (JsonElement node in nodes.EnumerateArray())
        {
            if (node.ValueKind != JsonValueKind.Object || !node.TryGetProperty("id", out JsonElement given))
            {
                throw new CircuitException($"nodes holds {Short(node)}, but each node is an object with an id");
            }

            long id = CircuitReader.IdOf(given, "id");
            if (!_nodes.TryAdd(id, node))
            {
                throw new CircuitException(id, "stands twice");
            }
        }
    }

    /// <summary>Builds the circuit; every node is checked, also those that the root does not reach.</summary>
    public Circuit Build(long root, long limit)
    {
        if (!_nodes.ContainsKey(root))
        {
            throw new CircuitException(FormattableString.Invariant($"the root {root} is not among the nodes"));
        }

        CircuitBuilder builder = new(_variables, isFunction: false, limit);
        foreach (long id in _nodes.Keys)
        {
            Add(id, builder);
        }

        return builder.Build(_built[root]);
    }

    /// <summary>Adds a node after what it rests on; a stack of our own, because circuits may be deep.</summary>
    private void Add(long wanted, CircuitBuilder builder)
    {
        Stack<(long Id, long[] Parts, int Next)> open = new();
        HashSet<long> above = [];
        Push(wanted);
        while (open.TryPop(out (long Id, long[] Parts, int Next) top))
        {
            int next = top.Next;
            while (next < top.Parts.Length && _built.ContainsKey(top.Parts[next]))
            {
                next++;
            }

            if (next == top.Parts.Length)
            {
                _built[top.Id] = Make(top.Id, top.Parts, builder);
                above.Remove(top.Id);
                continue;
            }

            open.Push((top.Id, top.Parts, next));
            if (above.Contains(top.Parts[next]))
            {
                throw new CircuitException(top.Parts[next], "is its own part: the circuit is cyclic");
            }

            Push(top.Parts[next]);
        }

        void Push(long id)
        {
            if (!_built.ContainsKey(id))
            {
                above.Add(id);
                open.Push((id, PartsOf(id), 0));
            }
        }
    }

    private long[] PartsOf(long id)
    {
        JsonElement node = _nodes[id];
        if (!node.TryGetProperty("product", out JsonElement list) && !node.TryGetProperty("sum", out list))
        {
            return [];
        }

        if (list.ValueKind != JsonValueKind.Array)
        {
            throw new CircuitException(id, "its parts are no list");
        }

        long[] parts = new long[list.GetArrayLength()];
        int i = 0;
        foreach (JsonElement part in list.EnumerateArray())
        {
            parts[i] = part.ValueKind == JsonValueKind.Number && part.TryGetInt64(out long value)
                ? value
                : throw new CircuitException(id, $"its parts hold {Short(part)}, but ids of nodes are whole numbers");
            if (!_nodes.ContainsKey(parts[i]))
            {
                throw new CircuitException(id, FormattableString.Invariant($"refers to node {parts[i]}, which is not there"));
            }

            i++;
        }

        return parts;
    }

    private int Make(long id, long[] parts, CircuitBuilder builder)
    {
        JsonElement node = _nodes[id];
        foreach (JsonProperty property in node.EnumerateObject())
        {
            if (!Keys.Contains(property.Name))
            {
                throw new CircuitException(id, $"{property.Name} is no key of a node; the keys are {string.Join(", ", Keys)}");
            }
        }

        string[] kinds = [.. ((string[])["variable", "product", "sum"]).Where(k => node.TryGetProperty(k, out _))];
        if (kinds.Length != 1)
        {
            throw new CircuitException(id, "is to have one of variable, product and sum");
        }

        int[] children = [.. parts.Select(p => _built[p])];
        return kinds[0] switch
        {
            "product" => builder.AddProduct(children, id),
            "sum" => builder.AddSum(children, Numbers(id, node, "weights"), id),
            _ => Leaf(id, node, builder),
        };
    }

    private int Leaf(long id, JsonElement node, CircuitBuilder builder)
    {
        string? name = node.GetProperty("variable").ValueKind == JsonValueKind.String ? node.GetProperty("variable").GetString() : null;
        if (name is null || !_names.TryGetValue(name, out int variable))
        {
            throw new CircuitException(id, $"refers to the variable {Short(node.GetProperty("variable"))}, which is not there");
        }

        bool isNormal = node.TryGetProperty("mean", out _) || node.TryGetProperty("sd", out _);
        if (node.TryGetProperty("p", out _) == isNormal)
        {
            throw new CircuitException(id, "a leaf takes either p, or mean and sd");
        }

        if (!isNormal)
        {
            return builder.AddDiscrete(variable, Numbers(id, node, "p"), id);
        }

        double mean = Number(id, node, "mean"), deviation = Number(id, node, "sd");
        return deviation > 0
            ? builder.AddGaussian(variable, new Gaussian(mean, deviation), id)
            : throw new CircuitException(id, FormattableString.Invariant($"sd is {deviation}, but must be above 0"));
    }

    private static double Number(long id, JsonElement node, string key) =>
        node.TryGetProperty(key, out JsonElement value) && value.ValueKind == JsonValueKind.Number
            ? value.GetDouble()
            : throw new CircuitException(id, $"needs {key}, a number");

    private static double[] Numbers(long id, JsonElement node, string key)
    {
        if (!node.TryGetProperty(key, out JsonElement list) || list.ValueKind != JsonValueKind.Array)
        {
            throw new CircuitException(id, $"needs {key}, a list of numbers");
        }

        double[] numbers = new double[list.GetArrayLength()];
        int i = 0;
        foreach (JsonElement value in list.EnumerateArray())
        {
            numbers[i++] = value.ValueKind == JsonValueKind.Number
                ? value.GetDouble()
                : throw new CircuitException(id, $"{key} holds {Short(value)}, which is no number");
        }

        return numbers;
    }

    private static string Short(JsonElement json)
    {
        string text = json.GetRawText();
        return text.Length <= 40 ? text : text[..40] + "…";
    }
}
