using Evenhand.Circuits.Learning;
using Evenhand.Circuits.Profiles;
using Evenhand.Circuits.Tests.Profiles;
using Xunit;

namespace Evenhand.Circuits.Tests.Learning;

public sealed class LearningTests
{
    /// <summary>Each full step climbs in likelihood times prior (Dempster, Laird and Rubin 1977, theorem 1).</summary>
    [Theory]
    [InlineData(1)]
    [InlineData(2)]
    [InlineData(3)]
    public void FullSteps_WithMissingValuesAndLabels_NeverFall(int seed)
    {
        ProfileCircuit truth = RandomProfile.Circuit(seed, 4, 7);
        ProfileShape shape = truth.Shape;
        TrainingTable table = Table(shape, seed, 500);
        double[][] margins = [.. shape.Fields.Select(f => Enumerable.Repeat(1.0 / f.StateCount, f.StateCount).ToArray())];
        ProfilePrior prior = new(shape, 0.1, margins, null);
        ExpectationStep step = new(shape, RandomProfile.Parameters(shape, seed + 100));
        int[] rows = [.. Enumerable.Range(0, table.Records)];
        double last = double.NegativeInfinity;
        for (int i = 0; i < 60; i++)
        {
            ProfileStatistics counts = new(shape);
            double objective = step.Add(table, rows, counts) + prior.LogDensity(step.Parameters);
            Assert.True(objective >= last - 1e-9 * Math.Abs(objective), $"step {i}: {objective} after {last}");
            last = objective;
            step.Take(prior.Likeliest(counts));
        }
    }

    [Fact]
    public void Learn_TheSameSeed_GivesTheSameBits()
    {
        TrainingTable table = Table(RandomProfile.Circuit(4, 3, 6).Shape, 4, 600);
        (TrainingTable sample, TrainingTable held) = table.Split(0.2, 1);
        LearningOptions options = new() { Profiles = 3, MostPasses = 5 };

        LearnedProfile a = new ProfileLearner(sample, held, options).Learn(), b = new ProfileLearner(sample, held, options).Learn();
        Assert.Equal(a.HeldOut, b.HeldOut);
        Assert.Equal(a.Circuit.Parameters.Weights, b.Circuit.Parameters.Weights);
    }

    /// <summary>Records drawn from a circuit are learned almost as well as the circuit itself knows them.</summary>
    [Fact]
    public void Learn_RecordsOfAKnownCircuit_ComesCloseToItsLikelihood()
    {
        ProfileCircuit truth = RandomProfile.Circuit(5, 3, 8);
        TrainingTable table = Drawn(truth, 5, 6000);
        (TrainingTable sample, TrainingTable held) = table.Split(0.25, 1);
        LearnedProfile learned = new ProfileLearner(sample, held, new LearningOptions { Profiles = 4, MostPasses = 30 }).Learn();

        double best = ProfileLearner.MeanLogLikelihood(truth, held);
        Assert.InRange(learned.HeldOut, best - 0.08, best + 0.01);
    }

    private static TrainingTable Table(ProfileShape shape, int seed, int count)
    {
        (ushort[][] codes, int[] evidence) = RandomProfile.Records(shape, seed, count);
        ushort[][] labels = [.. shape.Groups.Select((_, g) => evidence.Select(e => (ushort)shape.LabelsOf(e).Labels[g]).ToArray())];
        return new TrainingTable(shape.Groups, shape.Decision, shape.Fields, labels, [.. evidence.Select(e => (ushort)shape.LabelsOf(e).Decision)], codes);
    }

    private static TrainingTable Drawn(ProfileCircuit truth, int seed, int count)
    {
        Random random = new(seed);
        ProfileShape shape = truth.Shape;
        ProfileParameters p = truth.Parameters;
        int k = shape.Profiles;
        ushort[][] labels = [.. shape.Groups.Select(_ => new ushort[count])], values = [.. shape.Fields.Select(_ => new ushort[count])];
        ushort[] decisions = new ushort[count];
        for (int e = 0; e < count; e++)
        {
            int cell = Draw(random, shape.CellCount, i => p.Cells[i]);
            (int[] codes, int decision) = shape.CellOf(cell);
            decisions[e] = (ushort)decision;
            int[] states = new int[shape.Fields.Count];
            states[shape.Root] = Draw(random, k, z => p.Weights[(cell * k) + z]);
            int pattern = Draw(random, shape.PatternCount, r => p.Patterns[(((decision * k) + states[shape.Root]) * shape.PatternCount) + r]);
            for (int g = 0; g < codes.Length; g++)
            {
                labels[g][e] = (ushort)((pattern >> g & 1) == 1 ? codes[g] : shape.Groups[g].StateCount);
            }

            foreach (int field in shape.Inner.Reverse())
            {
                if (field != shape.Root)
                {
                    states[field] = Draw(random, k, z => p.Transitions[field][(states[shape.Parents[field]] * k) + z]);
                }

                values[field][e] = (ushort)Draw(random, shape.Fields[field].StateCount, x => p.Emissions[field][(x * k) + states[field]]);
                foreach (int leaf in shape.Leaves[field])
                {
                    values[leaf][e] = (ushort)Draw(random, shape.Fields[leaf].StateCount, x => p.Emissions[leaf][(x * k) + states[field]]);
                }
            }
        }

        return new TrainingTable(shape.Groups, shape.Decision, shape.Fields, labels, decisions, values);
    }

    private static int Draw(Random random, int count, Func<int, double> weight)
    {
        double at = random.NextDouble();
        int i = 0;
        while (i < count - 1 && (at -= weight(i)) > 0)
        {
            i++;
        }

        return i;
    }
}
