using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Tests.Queries;

/// <summary>Random circuits that are smooth and decomposable by construction, and every completion of them one by one.</summary>
internal static class RandomCircuit
{
    public static Variable[] Variables(Random random, int count) =>
    [
        .. Enumerable.Range(0, count).Select(v => random.Next(2) == 0
            ? Variable.Category($"c{v}", Enumerable.Range(0, 2 + random.Next(3)).Select(s => $"s{s}"))
            : Variable.Binned($"n{v}", Enumerable.Range(0, 3 + random.Next(2)).Select(e => e * 10.0))),
    ];

    /// <summary>A circuit over some variables; with <paramref name="deterministic"/> every sum is decided by one variable's state.</summary>
    public static Circuit Of(Random random, Variable[] variables, bool deterministic = false, bool isFunction = false, int[]? order = null)
    {
        CircuitBuilder builder = new(variables, isFunction);
        order ??= [.. Enumerable.Range(0, variables.Length)];
        int root = deterministic
            ? Decided(random, builder, variables, order)
            : Mixed(random, builder, variables, order, isFunction, [], 3);
        return builder.Build(root);
    }

    /// <summary>The probability of a completion, by the definition, from the root down.</summary>
    public static double At(Circuit circuit, int[] states) => At(circuit, circuit.Root, states);

    /// <summary>Every completion.</summary>
    public static IEnumerable<int[]> Completions(IReadOnlyList<Variable> variables)
    {
        int[] states = new int[variables.Count];
        while (true)
        {
            yield return [.. states];
            int v = states.Length - 1;
            while (v >= 0 && ++states[v] == variables[v].StateCount)
            {
                states[v--] = 0;
            }

            if (v < 0)
            {
                yield break;
            }
        }
    }

    private static double At(Circuit circuit, int node, int[] states)
    {
        double result = circuit.KindOf(node) == NodeKind.Product ? 1 : 0;
        switch (circuit.KindOf(node))
        {
            case NodeKind.Discrete:
                return circuit.ParametersOf(node)[states[circuit.VariableOf(node)]];
            case NodeKind.Product:
                foreach (int child in circuit.ChildrenOf(node))
                {
                    result *= At(circuit, child, states);
                }

                return result;
            default:
                int[] children = circuit.ChildrenOf(node).ToArray();
                double[] weights = circuit.WeightsOf(node).ToArray();
                return children.Select((child, i) => weights[i] * At(circuit, child, states)).Sum();
        }
    }

    private static int Mixed(Random random, CircuitBuilder builder, Variable[] variables, int[] scope, bool isFunction, Dictionary<string, List<int>> made, int depth)
    {
        // Nodes over the same variables are shared now and then.
        string key = string.Join(',', scope.Order());
        if (made.TryGetValue(key, out List<int>? shared) && random.Next(3) == 0)
        {
            return shared[random.Next(shared.Count)];
        }

        int node;
        if (scope.Length == 1 && (depth <= 0 || random.Next(2) == 0))
        {
            node = builder.AddDiscrete(scope[0], Numbers(random, variables[scope[0]].StateCount, isFunction));
        }
        else if (scope.Length == 1 || (depth > 0 && random.Next(2) == 0))
        {
            int[] parts = [.. Enumerable.Range(0, 2 + random.Next(2)).Select(_ => Mixed(random, builder, variables, scope, isFunction, made, depth - 1))];
            node = builder.AddSum(parts, Numbers(random, parts.Length, isFunction));
        }
        else
        {
            // The split is the same wherever the scope is: two such circuits are compatible.
            int cut = scope.Length / 2;
            node = builder.AddProduct([Mixed(random, builder, variables, scope[..cut], isFunction, made, depth), Mixed(random, builder, variables, scope[cut..], isFunction, made, depth)]);
        }

        made.TryAdd(key, []);
        made[key].Add(node);
        return node;
    }

    /// <summary>A decision tree: a sum over the states of the first variable, each with what follows.</summary>
    private static int Decided(Random random, CircuitBuilder builder, Variable[] variables, int[] scope)
    {
        int states = variables[scope[0]].StateCount;
        List<int> parts = [];
        for (int s = 0; s < states; s++)
        {
            double[] p = new double[states];
            p[s] = 1;
            int indicator = builder.AddDiscrete(scope[0], p);
            parts.Add(scope.Length == 1 ? indicator : builder.AddProduct([indicator, Decided(random, builder, variables, scope[1..])]));
        }

        return builder.AddSum(parts.ToArray(), Numbers(random, states, false));
    }

    private static double[] Numbers(Random random, int count, bool isFunction)
    {
        double[] numbers = [.. Enumerable.Range(0, count).Select(_ => random.Next(8) == 0 ? 0 : random.NextDouble())];
        if (isFunction)
        {
            return [.. numbers.Select(n => (2 * n) - 0.5)];
        }

        double sum = numbers.Sum();
        return sum == 0 ? [1, .. new double[count - 1]] : [.. numbers.Select(n => n / sum)];
    }
}
