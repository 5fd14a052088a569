using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Queries;

/// <summary>Exact answers from a circuit, each composed of the operations beside this type.</summary>
public static class CircuitQueries
{
    /// <summary>What is said of evidence that is impossible.</summary>
    public const string ZeroEvidence = "the evidence has probability zero: no completion of it is possible under the circuit";

    /// <summary>The probability of evidence; its density where it holds a known continuous number.</summary>
    public static Scaled Probability(Circuit circuit, Factors evidence)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        return CircuitFold.Up<Scaled, SumProduct>(circuit, new SumProduct(evidence))[circuit.Root];
    }

    /// <summary>The probability of an event that includes the evidence, given the evidence; or the expectation of factors over it.</summary>
    /// <exception cref="CircuitException">The evidence has probability zero.</exception>
    public static double Conditional(Circuit circuit, Factors asked, Factors evidence)
    {
        Scaled whole = Probability(circuit, evidence);
        return whole.IsZero ? throw new CircuitException(ZeroEvidence) : (Probability(circuit, asked) / whole).ToDouble();
    }

    /// <summary>The distributions of all variables with states given evidence, by one pass up and one down; null for continuous variables and those without a leaf.</summary>
    /// <exception cref="CircuitException">The evidence has probability zero.</exception>
    public static double[]?[] Posteriors(Circuit circuit, Factors evidence)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        ArgumentNullException.ThrowIfNull(evidence);
        Scaled[] values = CircuitFold.Up<Scaled, SumProduct>(circuit, new SumProduct(evidence));
        if (values[circuit.Root].IsZero)
        {
            throw new CircuitException(ZeroEvidence);
        }

        Scaled[] derivatives = CircuitFold.Down(circuit, values);
        Scaled[]?[] sums = new Scaled[circuit.Variables.Count][];
        for (int node = 0; node < circuit.NodeCount; node++)
        {
            if (circuit.KindOf(node) == NodeKind.Discrete)
            {
                AddLeaf(circuit, node, evidence, derivatives[node], ref sums[circuit.VariableOf(node)]);
            }
        }

        return [.. sums.Select(s => s?.Select(x => (x / values[circuit.Root]).ToDouble()).ToArray())];
    }

    /// <summary>Mean and standard deviation of a number given evidence.</summary>
    /// <remarks>A bin counts at its centre, else at its middle; the spread inside bins is left out.</remarks>
    /// <exception cref="CircuitException">A category, an open bin without a centre, or evidence of probability zero.</exception>
    public static (double Mean, double Deviation) Moments(Circuit circuit, int variable, Factors evidence)
    {
        double mean = Conditional(circuit, evidence.With(variable, Power(circuit, variable, 1, 0, evidence)), evidence);
        double variance = Conditional(circuit, evidence.With(variable, Power(circuit, variable, 2, mean, evidence)), evidence);
        return (mean, Math.Sqrt(Math.Max(0, variance)));
    }

    /// <summary>The covariance of two different numbers given evidence, about their means.</summary>
    public static double Covariance(Circuit circuit, int a, int b, Factors evidence)
    {
        ArgumentNullException.ThrowIfNull(evidence);
        ArgumentOutOfRangeException.ThrowIfEqual(a, b);
        Factors asked = evidence
            .With(a, Power(circuit, a, 1, Moments(circuit, a, evidence).Mean, evidence))
            .With(b, Power(circuit, b, 1, Moments(circuit, b, evidence).Mean, evidence));
        return Conditional(circuit, asked, evidence);
    }

    /// <summary>The expectation of a compatible function given evidence.</summary>
    /// <exception cref="CircuitException">The function is not compatible, or the evidence has probability zero.</exception>
    public static double Expectation(Circuit circuit, Circuit function, Factors evidence)
    {
        Circuit product = Multiplication.Of(Conditioning.On(circuit, evidence), function);
        return Probability(product, Factors.None(product)).ToDouble();
    }

    /// <summary>The likeliest completion of evidence: a state or number for each variable with a leaf, and the logarithm of its probability together with the evidence.</summary>
    /// <returns>NaN for variables without a leaf.</returns>
    /// <exception cref="CircuitException">The circuit is not deterministic, or the evidence has probability zero.</exception>
    public static (double[] Answers, double LogProbability) MostLikely(Circuit circuit, Factors evidence)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        if (!circuit.IsDeterministic)
        {
            throw new CircuitException("the likeliest completion needs a deterministic circuit; this one is not: two parts of a sum are possible together");
        }

        Scaled[] values = CircuitFold.Up<Scaled, MaxProduct>(circuit, new MaxProduct(evidence));
        return values[circuit.Root].IsZero
            ? throw new CircuitException(ZeroEvidence)
            : (Trace(circuit, values, evidence), values[circuit.Root].Log);
    }

    private static double[] Trace(Circuit circuit, Scaled[] values, Factors evidence)
    {
        double[] answers = new double[circuit.Variables.Count];
        Array.Fill(answers, double.NaN);
        Stack<int> open = new([circuit.Root]);
        while (open.TryPop(out int node))
        {
            ReadOnlySpan<int> children = circuit.ChildrenOf(node);
            if (circuit.IsLeaf(node))
            {
                answers[circuit.VariableOf(node)] = MaxProduct.Best(circuit, node, evidence).Answer;
            }
            else if (circuit.KindOf(node) == NodeKind.Sum)
            {
                int best = 0;
                ReadOnlySpan<double> weights = circuit.WeightsOf(node);
                for (int i = 1; i < children.Length; i++)
                {
                    best = (weights[i] * values[children[i]]).IsAbove(weights[best] * values[children[best]]) ? i : best;
                }

                open.Push(children[best]);
            }
            else
            {
                foreach (int child in children)
                {
                    open.Push(child);
                }
            }
        }

        return answers;
    }

    private static Factor Power(Circuit circuit, int variable, int power, double centre, Factors evidence)
    {
        Variable of = circuit.Variables[variable];
        if (of.IsContinuous)
        {
            return Factor.Power(power, centre);
        }

        if (of.Kind == VariableKind.Category)
        {
            throw new CircuitException($"{of.Name} is a category and has no mean; ask for its distribution");
        }

        double[] centres = [.. Enumerable.Range(0, of.StateCount).Select(of.CentreOf)];
        int open = Array.FindIndex(centres, double.IsNaN);
        while (open >= 0 && evidence[variable]?.AtState(open) == 0)
        {
            // A bin that the evidence excludes needs no centre.
            centres[open] = centre;
            open = Array.FindIndex(centres, double.IsNaN);
        }

        return open >= 0
            ? throw new CircuitException($"{of.Name} has no mean: its bin {of.Values[open]} is open and has no centre; give the variable centres")
            : Factor.OfStates(centres.Select(c => Math.Pow(c - centre, power)));
    }

    private static void AddLeaf(Circuit circuit, int leaf, Factors evidence, Scaled derivative, ref Scaled[]? sums)
    {
        ReadOnlySpan<double> p = circuit.ParametersOf(leaf);
        Factor? factor = evidence[circuit.VariableOf(leaf)];
        sums ??= new Scaled[p.Length];
        for (int s = 0; s < p.Length; s++)
        {
            sums[s] += (p[s] * (factor?.AtState(s) ?? 1)) * derivative;
        }
    }
}
