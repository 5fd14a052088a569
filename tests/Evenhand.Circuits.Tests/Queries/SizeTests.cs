using Evenhand.Circuits.Files;
using Evenhand.Circuits.Queries;
using Evenhand.Circuits.Structure;
using Xunit;

namespace Evenhand.Circuits.Tests.Queries;

/// <summary>Circuits of many variables, edges and levels.</summary>
public sealed class SizeTests
{
    [Fact]
    public void TenThousandVariables_InOneProduct_DoNotUnderflow()
    {
        const int n = 10_000;
        CircuitBuilder builder = new([.. Enumerable.Range(0, n).Select(v => Variable.Category($"v{v}", ["a", "b", "c"]))]);
        int product(double[] p) => builder.AddProduct([.. Enumerable.Range(0, n).Select(v => builder.AddDiscrete(v, p))]);
        Circuit circuit = builder.Build(builder.AddSum([product([0.2, 0.3, 0.5]), product([0.1, 0.3, 0.6])], [0.5, 0.5]));
        Factors evidence = Factors.None(circuit);
        for (int v = 0; v < n; v++)
        {
            // One copy a call would be quadratic in time for ten thousand; the test takes every fiftieth as known.
            evidence = v % 50 == 0 ? evidence.With(v, Factor.OfStates(1, 0, 0)) : evidence;
        }

        double expected = Math.Log(0.5) + (200 * Math.Log(0.2)) + Math.Log(1 + Math.Pow(0.5, 200));
        Assert.Equal(expected, CircuitQueries.Probability(circuit, evidence).Log, 1e-9);
        double[]?[] posteriors = CircuitQueries.Posteriors(circuit, evidence);
        Assert.Equal(0.2, posteriors[1]![0], 1e-12);
        Assert.Equal(1.0, posteriors[50]![0], 1e-12);
    }

    [Fact]
    public void AChainOfManyLevels_IsReadAskedConditionedAndMultipliedWithoutDeepCalls()
    {
        const int n = 20_000;
        Variable[] variables = [.. Enumerable.Range(0, 40).Select(v => Variable.Category($"v{v}", ["a", "b"]))];
        CircuitBuilder builder = new(variables);
        int[] below = [builder.AddDiscrete(0, [0.3, 0.7]), builder.AddDiscrete(0, [0.6, 0.4])];
        for (int level = 1; level < n; level++)
        {
            below = [builder.AddSum(below, [0.9, 0.1]), builder.AddSum(below, [0.2, 0.8])];
        }

        Circuit circuit = builder.Build(below[0]);
        using MemoryStream file = new();
        CircuitWriter.Write(circuit, file);
        file.Position = 0;
        Circuit read = CircuitReader.Read(file);
        Factors evidence = Factors.None(read).With(0, Factor.OfStates(1, 0));

        // The stationary mixture of the two-state chain is 2/3, 1/3.
        Assert.Equal((0.3 * 2 / 3) + (0.6 / 3), CircuitQueries.Probability(read, evidence).ToDouble(), 1e-12);
        Assert.False(read.IsDeterministic);
        Assert.Equal(1, CircuitQueries.Probability(Conditioning.On(read, evidence), evidence).ToDouble(), 1e-9);
        CircuitBuilder constant = new(variables, isFunction: true);
        Circuit function = constant.Build(constant.AddDiscrete(0, [1, 3]));
        Assert.Equal(1 + (2 * (1 - 0.4)), CircuitQueries.Expectation(read, function, Factors.None(read)), 1e-9);
    }

    [Fact]
    public void AMillionEdges_AreAnsweredExactly()
    {
        const int levels = 32, width = 180;
        Variable[] variables = [.. Enumerable.Range(0, levels).Select(v => Variable.Category($"v{v}", ["a", "b"]))];
        CircuitBuilder builder = new(variables);
        Random random = new(1);
        double[] uniform = [.. Enumerable.Repeat(1.0 / width, width)];
        int[] below = [.. Enumerable.Range(0, width).Select(_ => builder.AddDiscrete(0, [0.25, 0.75]))];
        for (int level = 1; level < levels; level++)
        {
            int[] sums = [.. Enumerable.Range(0, width).Select(_ => builder.AddSum(below, uniform))];
            int at = level;
            below = [.. sums.Select(s => builder.AddProduct([s, builder.AddDiscrete(at, [0.25, 0.75])]))];
        }

        Circuit circuit = builder.Build(builder.AddSum(below, uniform));
        Assert.True(circuit.EdgeCount > 1_000_000);
        Factors evidence = Factors.None(circuit).With(3, Factor.OfStates(1, 0)).With(30, Factor.OfStates(0, 1));
        Assert.Equal(0.25 * 0.75, CircuitQueries.Probability(circuit, evidence).ToDouble(), 1e-12);
        Assert.Equal(0.75, CircuitQueries.Posteriors(circuit, evidence)[17]![1], 1e-12);
    }

    [Fact]
    public void MoreThanTheLimit_IsRefused()
    {
        CircuitBuilder builder = new([Variable.Category("a", ["x", "y"])], limit: 3);
        int leaf = builder.AddDiscrete(0, [0.5, 0.5]);
        builder.AddProduct([leaf]);

        Assert.Contains("at most 3", Assert.Throws<CircuitException>(() => builder.AddProduct([leaf])).Message, StringComparison.Ordinal);
    }
}
