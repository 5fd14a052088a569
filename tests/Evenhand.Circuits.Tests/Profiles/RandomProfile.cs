using Evenhand.Circuits.Profiles;
using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Tests.Profiles;

/// <summary>Random profile circuits and records of them.</summary>
internal static class RandomProfile
{
    public static ProfileCircuit Circuit(int seed, int profiles, int fields, int groups = 2, bool withDecision = true)
    {
        Random random = new(seed);
        Variable[] labels = [.. Enumerable.Range(0, groups).Select(g => Category($"g{g}", 2 + g))];
        Variable[] inputs = [.. Enumerable.Range(0, fields).Select(f => Category($"x{f}", 2 + random.Next(3)))];
        int[] parents = [.. Enumerable.Range(0, fields).Select(f => f == 0 ? -1 : random.Next(Math.Max(0, f - 3), f))];
        ProfileShape shape = new(profiles, labels, withDecision ? Category("decision", 2) : null, inputs, parents);
        return new ProfileCircuit(shape, Parameters(shape, seed));
    }

    public static ProfileParameters Parameters(ProfileShape shape, int seed)
    {
        Random random = new(seed);
        int profiles = shape.Profiles;
        ProfileParameters p = ProfileParameters.Zero(shape);
        Fill(random, p.Cells, 1, shape.CellCount);
        Fill(random, p.Weights, shape.CellCount, profiles);
        Fill(random, p.Patterns, shape.Decisions * profiles, shape.PatternCount);
        foreach (double[] a in p.Transitions)
        {
            Fill(random, a, a.Length / profiles, profiles);
        }

        for (int f = 0; f < shape.Fields.Count; f++)
        {
            int states = shape.Fields[f].StateCount;
            double[] rows = new double[states * profiles];
            Fill(random, rows, profiles, states);
            for (int i = 0; i < rows.Length; i++)
            {
                p.Emissions[f][(i % states * profiles) + (i / states)] = rows[i];
            }
        }

        return p;
    }

    /// <summary>Random codes, about a third of them missing.</summary>
    public static (ushort[][] Codes, int[] Evidence) Records(ProfileShape shape, int seed, int count)
    {
        Random random = new(seed);
        ushort code(int states) => (ushort)(random.Next(3) == 0 ? states : random.Next(states));
        ushort[][] codes = [.. shape.Fields.Select(f => Enumerable.Range(0, count).Select(_ => code(f.StateCount)).ToArray())];
        int[] evidence = [.. Enumerable.Range(0, count).Select(_ => shape.EvidenceOf([.. shape.Groups.Select(g => code(g.StateCount))], shape.Decision is null ? 0 : random.Next(3)))];
        return (codes, evidence);
    }

    private static Variable Category(string name, int states) => Variable.Category(name, Enumerable.Range(0, states).Select(s => $"{s}"));

    private static void Fill(Random random, double[] numbers, int rows, int length)
    {
        for (int r = 0; r < rows; r++)
        {
            double[] row = [.. Enumerable.Range(0, length).Select(_ => 0.05 + random.NextDouble())];
            for (int i = 0; i < length; i++)
            {
                numbers[(r * length) + i] = row[i] / row.Sum();
            }
        }
    }
}
