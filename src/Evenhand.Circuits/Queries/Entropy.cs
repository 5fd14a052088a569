using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Queries;

/// <summary>Entropies and mutual information, in nats, where they are tractable.</summary>
/// <remarks>
/// Of a whole deterministic circuit: each completion takes one way, so the entropy is a sum over sums and leaves of flow times own
/// entropy. Of a few variables in any circuit: over their joint states, each an evaluation.
/// </remarks>
public static class Entropy
{
    /// <summary>Most joint states that are summed over one by one.</summary>
    public const int MostStates = 1 << 20;

    /// <summary>The entropy of all variables of a deterministic circuit; differential for continuous ones.</summary>
    /// <exception cref="CircuitException">The circuit is not deterministic.</exception>
    public static double OfAll(Circuit circuit)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        if (!circuit.IsDeterministic)
        {
            throw new CircuitException("the entropy of all variables needs a deterministic circuit; this one is not: two parts of a sum are possible together");
        }

        double[] flows = Flows.Of(circuit);
        double sum = 0;
        for (int node = 0; node < flows.Length; node++)
        {
            if (flows[node] > 0)
            {
                sum += flows[node] * Own(circuit, node);
            }
        }

        return sum;
    }

    /// <summary>The joint entropy of some variables with states, given evidence.</summary>
    /// <exception cref="CircuitException">A variable is continuous, or they have more than <see cref="MostStates"/> joint states.</exception>
    public static double Of(Circuit circuit, IReadOnlyList<int> variables, Factors evidence)
    {
        ArgumentNullException.ThrowIfNull(variables);
        double[] joint = JointOf(circuit, variables, evidence);
        return joint.Sum(Term);
    }

    /// <summary>H(of | given) = H(of, given) − H(given), under evidence.</summary>
    public static double Conditional(Circuit circuit, IReadOnlyList<int> of, IReadOnlyList<int> given, Factors evidence) =>
        Of(circuit, [.. of, .. given], evidence) - Of(circuit, given, evidence);

    /// <summary>I(a; b) under evidence, summed term by term so that independence gives no large cancellation.</summary>
    public static double MutualInformation(Circuit circuit, IReadOnlyList<int> a, IReadOnlyList<int> b, Factors evidence)
    {
        double[] joint = JointOf(circuit, [.. a, .. b], evidence);
        double[] first = JointOf(circuit, a, evidence), second = JointOf(circuit, b, evidence);
        double sum = 0;
        for (int i = 0; i < joint.Length; i++)
        {
            double independent = first[i / second.Length] * second[i % second.Length];
            sum += joint[i] > 0 ? joint[i] * Math.Log(joint[i] / independent) : 0;
        }

        return sum;
    }

    /// <summary>The probabilities of all joint states, the last variable running fastest.</summary>
    private static double[] JointOf(Circuit circuit, IReadOnlyList<int> variables, Factors evidence)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        long states = 1;
        foreach (int variable in variables)
        {
            if (circuit.Variables[variable].IsContinuous)
            {
                throw new CircuitException($"{circuit.Variables[variable].Name} is continuous: entropies of states need a variable with values or edges");
            }

            states *= circuit.Variables[variable].StateCount;
            if (states > MostStates)
            {
                throw new CircuitException(FormattableString.Invariant($"the variables have more than {MostStates:N0} joint states: take fewer"));
            }
        }

        double[] joint = new double[states];
        for (int i = 0; i < joint.Length; i++)
        {
            Factors asked = evidence;
            for ((int v, int rest) = (variables.Count - 1, i); v >= 0; v--)
            {
                int count = circuit.Variables[variables[v]].StateCount, state = rest % count;
                rest /= count;
                asked = asked.With(variables[v], Factor.OfStates(Enumerable.Range(0, count).Select(s => s == state ? 1.0 : 0)));
            }

            joint[i] = CircuitQueries.Conditional(circuit, asked, evidence);
        }

        return joint;
    }

    private static double Own(Circuit circuit, int node)
    {
        if (circuit.KindOf(node) == NodeKind.Gaussian)
        {
            Gaussian leaf = Gaussian.Of(circuit.ParametersOf(node));
            double variance = leaf.Moment(2, leaf.Mean, double.NegativeInfinity, double.PositiveInfinity);
            double inside = Math.Clamp(leaf.Mean, leaf.Low, leaf.High);
            double square = (inside - leaf.Mean) * (inside - leaf.Mean) / (2 * leaf.Deviation * leaf.Deviation);
            return leaf.IsPoint ? 0 : (variance / (2 * leaf.Deviation * leaf.Deviation)) - leaf.LogDensityAt(inside) - square;
        }

        ReadOnlySpan<double> p = circuit.KindOf(node) == NodeKind.Discrete ? circuit.ParametersOf(node) : circuit.WeightsOf(node);
        double sum = 0;
        foreach (double x in p)
        {
            sum += Term(x);
        }

        return sum;
    }

    private static double Term(double p) => p > 0 ? -p * Math.Log(p) : 0;
}
