using System.Text.Json;
using Evenhand.Circuits.Structure;
using Evenhand.Testing;

namespace Evenhand.Circuits.Tests.Queries;

/// <summary>Compiles a Bayesian network of tests/data to a deterministic circuit: one variable decided after the other, what no later variable needs forgotten.</summary>
internal sealed class BayesianNetwork
{
    private readonly List<Variable> _variables = [];
    private readonly List<int[]> _parents = [];
    private readonly List<Dictionary<string, double[]>> _tables = [];
    private readonly Dictionary<string, int> _made = [];
    private readonly CircuitBuilder _builder;

    private BayesianNetwork(JsonElement network)
    {
        foreach (JsonElement node in network.GetProperty("nodes").EnumerateArray())
        {
            _parents.Add([.. node.GetProperty("parents").EnumerateArray().Select(p => _variables.FindIndex(v => v.Name == p.GetString()))]);
            _variables.Add(Variable.Category(node.GetProperty("name").GetString()!, node.GetProperty("states").EnumerateArray().Select(s => s.GetString()!)));
            _tables.Add(node.GetProperty("cpt").EnumerateArray().ToDictionary(
                row => string.Join('|', row.GetProperty("given").EnumerateArray().Select(g => g.GetString())),
                row => row.GetProperty("p").EnumerateArray().Select(p => p.GetDouble()).ToArray()));
        }

        _builder = new CircuitBuilder(_variables);
    }

    public static Circuit Compile(string file)
    {
        using JsonDocument document = JsonDocument.Parse(File.ReadAllBytes(TestData.Path(file.Replace("data/", "", StringComparison.Ordinal))));
        BayesianNetwork network = new(document.RootElement);
        return network._builder.Build(network.From(0, []));
    }

    private int From(int variable, Dictionary<int, int> known)
    {
        string key = $"{variable}:{string.Join(',', known.OrderBy(k => k.Key))}";
        if (_made.TryGetValue(key, out int made))
        {
            return made;
        }

        double[] weights = _tables[variable][string.Join('|', _parents[variable].Select(p => _variables[p].Values[known[p]]))];
        int[] parts = [.. weights.Select((_, state) => Part(variable, state, known))];
        return _made[key] = _builder.AddSum(parts, weights);
    }

    private int Part(int variable, int state, Dictionary<int, int> known)
    {
        double[] p = new double[_variables[variable].StateCount];
        p[state] = 1;
        int indicator = _builder.AddDiscrete(variable, p);
        if (variable + 1 == _variables.Count)
        {
            return indicator;
        }

        Dictionary<int, int> later = known.Append(KeyValuePair.Create(variable, state))
            .Where(k => _parents.Skip(variable + 1).Any(parents => parents.Contains(k.Key)))
            .ToDictionary(k => k.Key, k => k.Value);
        return _builder.AddProduct([indicator, From(variable + 1, later)]);
    }
}
