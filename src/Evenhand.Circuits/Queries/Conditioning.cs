using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Queries;

/// <summary>The distribution given evidence, as a circuit of the same structure: what makes every other query one under evidence.</summary>
/// <remarks>
/// Each part of a sum is weighed by what it makes of the evidence, each leaf is multiplied by it. Parts that the evidence excludes are
/// left out, so a deterministic circuit stays deterministic.
/// </remarks>
public static class Conditioning
{
    /// <summary>Gives the circuit given evidence.</summary>
    /// <param name="circuit">A distribution.</param>
    /// <param name="evidence">Evidence: factors that are 0 or 1, intervals, known numbers.</param>
    /// <exception cref="CircuitException">The evidence has probability zero.</exception>
    public static Circuit On(Circuit circuit, Factors evidence)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        ArgumentNullException.ThrowIfNull(evidence);
        Scaled[] values = CircuitFold.Up<Scaled, SumProduct>(circuit, new SumProduct(evidence));
        if (values[circuit.Root].IsZero)
        {
            throw new CircuitException(CircuitQueries.ZeroEvidence);
        }

        // Parts reached by nothing possible are never built; what is built adds up to one, up to rounding.
        CircuitBuilder builder = new(circuit.Variables, isFunction: false, long.MaxValue);
        int[] place = new int[circuit.NodeCount];
        for (int node = 0; node < place.Length; node++)
        {
            place[node] = values[node].IsZero ? -1 : circuit.KindOf(node) switch
            {
                NodeKind.Discrete => Discrete(circuit, node, evidence, values[node].ToDouble(), builder),
                NodeKind.Gaussian => Continuous(circuit, node, evidence, builder),
                NodeKind.Product => builder.AddProduct(Places(circuit.ChildrenOf(node), place), circuit.IdOf(node)),
                _ => Sum(circuit, node, values, place, builder),
            };
        }

        return builder.Build(place[circuit.Root]);
    }

    private static int Discrete(Circuit circuit, int leaf, Factors evidence, double value, CircuitBuilder builder)
    {
        Factor? factor = evidence[circuit.VariableOf(leaf)];
        double[] p = circuit.ParametersOf(leaf).ToArray();
        for (int s = 0; s < p.Length; s++)
        {
            p[s] = p[s] * (factor?.AtState(s) ?? 1) / value;
        }

        return builder.AddDiscrete(circuit.VariableOf(leaf), p, circuit.IdOf(leaf));
    }

    private static int Continuous(Circuit circuit, int leaf, Factors evidence, CircuitBuilder builder)
    {
        Gaussian own = Gaussian.Of(circuit.ParametersOf(leaf));
        return builder.AddGaussian(circuit.VariableOf(leaf), evidence[circuit.VariableOf(leaf)]?.Given(own) ?? own, circuit.IdOf(leaf));
    }

    private static int Sum(Circuit circuit, int node, Scaled[] values, int[] place, CircuitBuilder builder)
    {
        List<int> parts = [];
        List<double> weights = [];
        ReadOnlySpan<int> children = circuit.ChildrenOf(node);
        for (int i = 0; i < children.Length; i++)
        {
            double weight = (circuit.WeightsOf(node)[i] * values[children[i]] / values[node]).ToDouble();
            if (weight > 0)
            {
                parts.Add(place[children[i]]);
                weights.Add(weight);
            }
        }

        return builder.AddSum(parts.ToArray(), weights.ToArray(), circuit.IdOf(node));
    }

    private static int[] Places(ReadOnlySpan<int> children, int[] place)
    {
        int[] places = new int[children.Length];
        for (int i = 0; i < places.Length; i++)
        {
            places[i] = place[children[i]];
        }

        return places;
    }
}
