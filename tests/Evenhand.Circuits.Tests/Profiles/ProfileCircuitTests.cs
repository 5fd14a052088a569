using Evenhand.Circuits.Profiles;
using Evenhand.Circuits.Queries;
using Evenhand.Circuits.Structure;
using Xunit;

namespace Evenhand.Circuits.Tests.Profiles;

/// <summary>The fast form against the general circuit that it converts to, which is tested apart against enumeration.</summary>
public sealed class ProfileCircuitTests
{
    [Theory]
    [InlineData(1, 4, 6)]
    [InlineData(2, 16, 20)]
    [InlineData(3, 5, 1)]
    [InlineData(4, 17, 9)]
    [InlineData(5, 32, 70)]
    public void LogLikelihood_OfIncompleteRecords_IsTheGeneralCircuits(int seed, int profiles, int fields)
    {
        ProfileCircuit profile = RandomProfile.Circuit(seed, profiles, fields);
        (double[] exact, double[] single, double[] double_) = LogLikelihoods(profile, seed, 100);

        for (int e = 0; e < exact.Length; e++)
        {
            Assert.Equal(1, Math.Exp(double_[e] - exact[e]), 1e-12 * Math.Max(1, fields / 20.0));
            Assert.Equal(1, Math.Exp(single[e] - exact[e]), 1e-6 * Math.Max(1, fields / 10.0));
        }
    }

    [Fact]
    public void LogLikelihood_OfPlainData_IsTheGeneralCircuits()
    {
        (double[] exact, _, double[] double_) = LogLikelihoods(RandomProfile.Circuit(6, 8, 12, groups: 0, withDecision: false), 6, 100);

        Assert.Equal(exact, double_, (a, b) => Math.Abs(a - b) < 1e-12);
    }

    [Fact]
    public void Posteriors_OfHiddenStatesThroughEmissions_GiveTheGeneralCircuitsFieldPosteriors()
    {
        ProfileCircuit profile = RandomProfile.Circuit(7, 6, 10);
        Circuit circuit = profile.ToCircuit();
        ProfileShape shape = profile.Shape;
        (ushort[][] codes, int[] evidence) = RandomProfile.Records(shape, 7, 40);
        ProfileEngine<double, DoubleArithmetic> engine = new(shape, profile.Parameters);
        ProfileBlock<double> block = Block(engine, codes, evidence, 0, 40);
        engine.Up(block);
        engine.Down(block, null);

        for (int e = 0; e < 40; e++)
        {
            double[]?[] posteriors = CircuitQueries.Posteriors(circuit, FactorsOf(circuit, shape, codes, evidence, e));
            foreach (int field in shape.Inner.Where(f => codes[f][e] == shape.Fields[f].StateCount))
            {
                double[] expected = posteriors[circuit.IndexOf(shape.Fields[field].Name)]!;
                for (int x = 0; x < expected.Length; x++)
                {
                    double sum = Enumerable.Range(0, 6).Sum(z => block.Down[field][(e * engine.Width) + z] * profile.Parameters.Emissions[field][(x * 6) + z]);
                    Assert.Equal(expected[x], sum, 1e-12);
                }
            }
        }
    }

    [Fact]
    public void UpAndDown_AnyBlocks_GiveTheSameBits()
    {
        ProfileCircuit profile = RandomProfile.Circuit(8, 16, 20);
        (ushort[][] codes, int[] evidence) = RandomProfile.Records(profile.Shape, 8, 203);
        (float[] whole, double likelihood) = Flows(profile, codes, evidence, 203);

        foreach (int size in (int[])[1, 7, 64])
        {
            (float[] flows, double sum) = Flows(profile, codes, evidence, size);
            Assert.Equal(whole, flows);
            Assert.Equal(likelihood, sum);
        }
    }

    [Fact]
    public void UpAndDown_AfterConstruction_AllocateNothing()
    {
        ProfileCircuit profile = RandomProfile.Circuit(9, 16, 20);
        (ushort[][] codes, int[] evidence) = RandomProfile.Records(profile.Shape, 9, 64);
        ProfileEngine<float, FloatArithmetic> engine = new(profile.Shape, profile.Parameters);
        ProfileBlock<float> block = Block(engine, codes, evidence, 0, 64);
        ProfileFlows<float> flows = engine.NewFlows();
        engine.Up(block);
        engine.Down(block, flows);
        long before = GC.GetAllocatedBytesForCurrentThread();
        for (int i = 0; i < 10; i++)
        {
            engine.Up(block);
            engine.Down(block, flows);
        }

        Assert.Equal(0, GC.GetAllocatedBytesForCurrentThread() - before);
    }

    /// <summary>A record counts once in every field and transition, however much of it is missing.</summary>
    [Fact]
    public void Flows_OfAnyRecords_AddUpToTheirNumber()
    {
        ProfileCircuit profile = RandomProfile.Circuit(10, 6, 12);
        ProfileShape shape = profile.Shape;
        (ushort[][] codes, int[] evidence) = RandomProfile.Records(shape, 10, 77);
        ProfileEngine<double, DoubleArithmetic> engine = new(shape, profile.Parameters);
        ProfileFlows<double> flows = engine.NewFlows();
        ProfileBlock<double> block = Block(engine, codes, evidence, 0, 77);
        engine.Up(block);
        engine.Down(block, flows);

        Assert.Equal(77, flows.Evidence.Sum(), 1e-10);
        for (int f = 0; f < shape.Fields.Count; f++)
        {
            Assert.Equal(77, flows.Emissions[f].Sum(), 1e-10);
            double[] a = profile.Parameters.Transitions[f];
            double transitions = Enumerable.Range(0, a.Length).Sum(i => a[i] * flows.Outer[f][(i / 6 * engine.Width) + (i % 6)]);
            Assert.Equal(a.Length == 0 ? 0 : 77, transitions, 1e-10);
        }
    }

    private static (float[] Flows, double LogLikelihood) Flows(ProfileCircuit profile, ushort[][] codes, int[] evidence, int size)
    {
        ProfileEngine<float, FloatArithmetic> engine = new(profile.Shape, profile.Parameters);
        ProfileFlows<float> flows = engine.NewFlows();
        for (int from = 0; from < evidence.Length; from += size)
        {
            ProfileBlock<float> block = Block(engine, codes, evidence, from, Math.Min(size, evidence.Length - from));
            engine.Up(block);
            engine.Down(block, flows);
        }

        return ([.. flows.Evidence, .. flows.Outer.SelectMany(o => o), .. flows.Emissions.SelectMany(o => o)], flows.LogLikelihood);
    }

    private static (double[] Exact, double[] Single, double[] Double) LogLikelihoods(ProfileCircuit profile, int seed, int count)
    {
        Circuit circuit = profile.ToCircuit();
        (ushort[][] codes, int[] evidence) = RandomProfile.Records(profile.Shape, seed, count);
        ProfileEngine<float, FloatArithmetic> single = new(profile.Shape, profile.Parameters);
        ProfileEngine<double, DoubleArithmetic> precise = new(profile.Shape, profile.Parameters);
        ProfileBlock<float> floats = Block(single, codes, evidence, 0, count);
        ProfileBlock<double> doubles = Block(precise, codes, evidence, 0, count);
        single.Up(floats);
        precise.Up(doubles);
        double[] exact = [.. Enumerable.Range(0, count).Select(e => CircuitQueries.Probability(circuit, FactorsOf(circuit, profile.Shape, codes, evidence, e)).Log)];
        return (exact, floats.LogLikelihood[..count], doubles.LogLikelihood[..count]);
    }

    private static ProfileBlock<T> Block<T, TArithmetic>(ProfileEngine<T, TArithmetic> engine, ushort[][] codes, int[] evidence, int from, int count)
        where T : unmanaged, System.Numerics.IFloatingPointIeee754<T>
        where TArithmetic : struct, IVectorArithmetic<T>
    {
        ProfileBlock<T> block = engine.NewBlock(count);
        block.Count = count;
        for (int f = 0; f < codes.Length; f++)
        {
            codes[f].AsSpan(from, count).CopyTo(block.Codes[f]);
        }

        evidence.AsSpan(from, count).CopyTo(block.Evidence);
        return block;
    }

    /// <summary>What is known of a record, which labels are known among it.</summary>
    private static Factors FactorsOf(Circuit circuit, ProfileShape shape, ushort[][] codes, int[] evidence, int e)
    {
        Factors factors = Factors.None(circuit);
        (int[] labels, int decision) = shape.LabelsOf(evidence[e]);
        for (int g = 0; g < labels.Length; g++)
        {
            factors = Known(circuit, factors, shape.Groups[g], labels[g]);
        }

        if (shape.Decision is not null)
        {
            factors = Known(circuit, factors, shape.Decision, decision);
        }

        if (shape.Groups.Count > 0)
        {
            int known = circuit.IndexOf("(known labels)");
            factors = factors.With(known, Factor.OfStates(Enumerable.Range(0, shape.PatternCount).Select(p => p == shape.KnownLabelsOf(evidence[e]) ? 1.0 : 0)));
        }

        for (int f = 0; f < codes.Length; f++)
        {
            factors = Known(circuit, factors, shape.Fields[f], codes[f][e]);
        }

        return factors;
    }

    private static Factors Known(Circuit circuit, Factors factors, Variable variable, int code) => code == variable.StateCount
        ? factors
        : factors.With(circuit.IndexOf(variable.Name), Factor.OfStates(Enumerable.Range(0, variable.StateCount).Select(s => s == code ? 1.0 : 0)));
}
