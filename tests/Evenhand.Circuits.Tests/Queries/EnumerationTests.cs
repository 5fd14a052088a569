using CsCheck;
using Evenhand.Circuits.Queries;
using Evenhand.Circuits.Structure;
using Xunit;

namespace Evenhand.Circuits.Tests.Queries;

/// <summary>Every query against sums over all completions, which are computed apart from the engine.</summary>
public sealed class EnumerationTests
{
    private const double Tolerance = 1e-12;

    [Fact]
    public void Probability_AnyEvidence_IsTheSumOverItsCompletions() => Check((random, circuit, evidence, allowed) =>
        Near(Mass(circuit, allowed), CircuitQueries.Probability(circuit, evidence).ToDouble()));

    [Fact]
    public void Posteriors_AnyEvidence_AreTheSharesOfItsCompletions() => Check((random, circuit, evidence, allowed) =>
    {
        double whole = Mass(circuit, allowed);
        double[]?[] posteriors = CircuitQueries.Posteriors(circuit, evidence);
        for (int v = 0; v < circuit.Variables.Count; v++)
        {
            for (int s = 0; s < circuit.Variables[v].StateCount; s++)
            {
                Near(Mass(circuit, x => allowed(x) && x[v] == s) / whole, posteriors[v]![s]);
            }
        }
    });

    [Fact]
    public void MomentsAndCovariance_OfNumbers_AreThoseOfTheCompletions() => Check((random, circuit, evidence, allowed) =>
    {
        double whole = Mass(circuit, allowed);
        double expected(Func<int[], double> of) => RandomCircuit.Completions(circuit.Variables).Where(allowed).Sum(x => RandomCircuit.At(circuit, x) * of(x)) / whole;
        int[] numbers = [.. Enumerable.Range(0, circuit.Variables.Count).Where(v => circuit.Variables[v].Kind == VariableKind.Number)];
        double mean(int v) => expected(x => circuit.Variables[v].CentreOf(x[v]));
        foreach (int v in numbers)
        {
            (double m, double deviation) = CircuitQueries.Moments(circuit, v, evidence);
            Near(mean(v), m, 100);
            Near(expected(x => Math.Pow(circuit.Variables[v].CentreOf(x[v]) - mean(v), 2)), deviation * deviation, 1000);
        }

        if (numbers.Length > 1)
        {
            (int a, int b) = (numbers[0], numbers[1]);
            Near(expected(x => (circuit.Variables[a].CentreOf(x[a]) - mean(a)) * (circuit.Variables[b].CentreOf(x[b]) - mean(b))), CircuitQueries.Covariance(circuit, a, b, evidence), 1000);
        }
    });

    [Fact]
    public void Conditioning_AnyEvidence_GivesEachCompletionItsShare() => Check((random, circuit, evidence, allowed) =>
    {
        double whole = Mass(circuit, allowed);
        Circuit given = Conditioning.On(circuit, evidence);
        foreach (int[] x in RandomCircuit.Completions(circuit.Variables))
        {
            Near(allowed(x) ? RandomCircuit.At(circuit, x) / whole : 0, RandomCircuit.At(given, x));
        }
    });

    [Fact]
    public void Expectation_OfACompatibleFunction_IsTheWeightedSum() => Check((random, circuit, evidence, allowed) =>
    {
        Circuit function = RandomCircuit.Of(random, [.. circuit.Variables], isFunction: true);
        double sum = RandomCircuit.Completions(circuit.Variables).Where(allowed).Sum(x => RandomCircuit.At(circuit, x) * RandomCircuit.At(function, x));
        Near(sum / Mass(circuit, allowed), CircuitQueries.Expectation(circuit, function, evidence), 100);
    });

    [Fact]
    public void Multiplication_IsPointwise() => Check((random, circuit, evidence, allowed) =>
    {
        Circuit function = RandomCircuit.Of(random, [.. circuit.Variables], isFunction: true);
        Circuit product = Multiplication.Of(circuit, function);
        foreach (int[] x in RandomCircuit.Completions(circuit.Variables))
        {
            Near(RandomCircuit.At(circuit, x) * RandomCircuit.At(function, x), RandomCircuit.At(product, x), 10);
        }
    });

    [Fact]
    public void EntropiesAndInformation_OfSomeVariables_AreThoseOfTheCompletions() => Check((random, circuit, evidence, allowed) =>
    {
        double whole = Mass(circuit, allowed);
        double h(params int[] of) => RandomCircuit.Completions(circuit.Variables).Where(allowed)
            .GroupBy(x => string.Join(',', of.Select(v => x[v])), x => RandomCircuit.At(circuit, x) / whole)
            .Sum(g => g.Sum() > 0 ? -g.Sum() * Math.Log(g.Sum()) : 0);
        if (circuit.Variables.Count >= 3)
        {
            Near(h(0, 1), Entropy.Of(circuit, [0, 1], evidence), 10);
            Near(h(0, 1) - h(1), Entropy.Conditional(circuit, [0], [1], evidence), 10);
            Near(h(0) + h(1, 2) - h(0, 1, 2), Entropy.MutualInformation(circuit, [0], [1, 2], evidence), 10);
        }
    });

    [Fact]
    public void MostLikely_OfADeterministicCircuit_IsTheLargestCompletion() => Check(
        (random, circuit, evidence, allowed) =>
        {
            Assert.True(circuit.IsDeterministic);
            (double[] answers, double log) = CircuitQueries.MostLikely(circuit, evidence);
            double best = RandomCircuit.Completions(circuit.Variables).Where(allowed).Max(x => RandomCircuit.At(circuit, x));
            int[] states = [.. answers.Select(a => (int)a)];
            Near(best, Math.Exp(log));
            Assert.True(allowed(states));
            Near(best, RandomCircuit.At(circuit, states));
        },
        deterministic: true);

    [Fact]
    public void EntropyAndDivergence_OfDeterministicCircuits_AreThoseOfTheCompletions() => Check(
        (random, circuit, evidence, allowed) =>
        {
            int[][] all = [.. RandomCircuit.Completions(circuit.Variables)];
            Near(all.Sum(x => RandomCircuit.At(circuit, x) is > 0 and var p ? -p * Math.Log(p) : 0), Entropy.OfAll(circuit), 10);
            Circuit other = RandomCircuit.Of(random, [.. circuit.Variables], deterministic: true);
            double divergence = all.Sum(x => RandomCircuit.At(circuit, x) is > 0 and var p ? p * Math.Log(p / RandomCircuit.At(other, x)) : 0);
            Near(divergence, Divergence.Of(circuit, other), 10);
        },
        deterministic: true);

    /// <summary>Determinism is never claimed where two parts of a sum are possible together.</summary>
    [Fact]
    public void IsDeterministic_OfAnyCircuit_IsNeverClaimedWrongly() => Check((random, circuit, evidence, allowed) =>
    {
        if (!circuit.IsDeterministic)
        {
            return;
        }

        double best = RandomCircuit.Completions(circuit.Variables).Where(allowed).Max(x => RandomCircuit.At(circuit, x));
        Near(best, Math.Exp(CircuitQueries.MostLikely(circuit, evidence).LogProbability));
    });

    [Fact]
    public void MostLikely_OfAMixture_IsRefused()
    {
        CircuitBuilder builder = new([Variable.Category("a", ["x", "y"])]);
        int mixture = builder.AddSum([builder.AddDiscrete(0, [0.5, 0.5]), builder.AddDiscrete(0, [0.1, 0.9])], [0.5, 0.5]);
        Circuit circuit = builder.Build(mixture);

        Assert.Contains("deterministic", Assert.Throws<CircuitException>(() => CircuitQueries.MostLikely(circuit, Factors.None(circuit))).Message, StringComparison.Ordinal);
        Assert.Contains("deterministic", Assert.Throws<CircuitException>(() => Divergence.Of(circuit, circuit)).Message, StringComparison.Ordinal);
    }

    private static void Check(Action<Random, Circuit, Factors, Func<int[], bool>> check, bool deterministic = false) => Gen.Int[0, int.MaxValue].Sample(
        seed =>
        {
            Random random = new(seed);
            Variable[] variables = RandomCircuit.Variables(random, 1 + random.Next(5));
            Circuit circuit = RandomCircuit.Of(random, variables, deterministic);
            (Factors evidence, Func<int[], bool> allowed) = Evidence(random, circuit);
            if (Mass(circuit, allowed) > 0)
            {
                check(random, circuit, evidence, allowed);
            }
        },
        iter: 150);

    /// <summary>For each variable nothing, a state, or a set of states.</summary>
    private static (Factors Evidence, Func<int[], bool> Allowed) Evidence(Random random, Circuit circuit)
    {
        Factors evidence = Factors.None(circuit);
        bool[][] allowed = [.. circuit.Variables.Select(v => Enumerable.Repeat(true, v.StateCount).ToArray())];
        for (int v = 0; v < allowed.Length; v++)
        {
            if (random.Next(2) == 0)
            {
                allowed[v] = [.. allowed[v].Select(_ => random.Next(2) == 0)];
                evidence = evidence.With(v, Factor.OfStates(allowed[v].Select(a => a ? 1.0 : 0)));
            }
        }

        return (evidence, x => x.Select((s, v) => allowed[v][s]).All(a => a));
    }

    private static double Mass(Circuit circuit, Func<int[], bool> allowed) =>
        RandomCircuit.Completions(circuit.Variables).Where(allowed).Sum(x => RandomCircuit.At(circuit, x));

    private static void Near(double expected, double actual, double times = 1) => Assert.True(
        Math.Abs(expected - actual) <= Tolerance * times * Math.Max(1e-3, Math.Max(Math.Abs(expected), Math.Abs(actual))) || (double.IsInfinity(expected) && expected == actual),
        $"{expected} and {actual}");
}
