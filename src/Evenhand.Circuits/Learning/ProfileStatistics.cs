using Evenhand.Circuits.Profiles;

namespace Evenhand.Circuits.Learning;

/// <summary>Expected counts of everything that a profile circuit has a probability for.</summary>
internal sealed class ProfileStatistics
{
    private readonly ProfileShape _shape;

    public ProfileStatistics(ProfileShape shape)
    {
        _shape = shape;
        Counts = ProfileParameters.Zero(shape);
    }

    /// <summary>The counts: <see cref="ProfileParameters.Weights"/> by cell and profile; <see cref="ProfileParameters.Cells"/> is not used.</summary>
    public ProfileParameters Counts { get; }

    /// <summary>Records counted; a weighted number after blending.</summary>
    public double Records { get; private set; }

    /// <summary>Adds flows that were taken at some parameters.</summary>
    public void Add(ProfileFlows<double> flows, ProfileParameters at)
    {
        int k = _shape.Profiles;
        AddCells(flows, at);
        for (int f = 0; f < _shape.Fields.Count; f++)
        {
            for (int i = 0; i < Counts.Emissions[f].Length; i++)
            {
                Counts.Emissions[f][i] += flows.Emissions[f][(i / k * flows.Width) + (i % k)];
            }

            for (int i = 0; i < Counts.Transitions[f].Length; i++)
            {
                Counts.Transitions[f][i] += at.Transitions[f][i] * flows.Outer[f][(i / k * flows.Width) + (i % k)];
            }
        }

        Records += flows.Records;
    }

    /// <summary>this ← (1 − share) · this + share · other, each per record, scaled to a number of records.</summary>
    public void Blend(ProfileStatistics other, double share, double records)
    {
        double own = Records == 0 ? 0 : (1 - share) * records / Records;
        double theirs = (Records == 0 ? 1 : share) * records / other.Records;
        foreach ((double[] a, double[] b) in Arrays(Counts).Zip(Arrays(other.Counts)))
        {
            for (int i = 0; i < a.Length; i++)
            {
                a[i] = (own * a[i]) + (theirs * b[i]);
            }
        }

        Records = records;
    }

    /// <summary>Forgets everything.</summary>
    public void Clear()
    {
        Records = 0;
        foreach (double[] array in Arrays(Counts))
        {
            Array.Clear(array);
        }
    }

    private static IEnumerable<double[]> Arrays(ProfileParameters p) => [p.Weights, p.Patterns, .. p.Transitions, .. p.Emissions];

    /// <summary>Shares the profile's posterior out among the cells that the evidence allows.</summary>
    private void AddCells(ProfileFlows<double> flows, ProfileParameters at)
    {
        int k = _shape.Profiles, patterns = _shape.PatternCount;
        double[] shares = new double[_shape.CellCount];
        for (int evidence = 0; evidence < _shape.EvidenceCount; evidence++)
        {
            ReadOnlySpan<double> flow = flows.Evidence.AsSpan(evidence * flows.Width, k);
            if (!flow.ContainsAnyExcept(0.0))
            {
                continue;
            }

            ReadOnlySpan<int> cells = _shape.CellsOf(evidence);
            int pattern = _shape.KnownLabelsOf(evidence);
            for (int z = 0; z < k; z++)
            {
                double whole = 0;
                for (int i = 0; i < cells.Length; i++)
                {
                    int cell = cells[i];
                    shares[i] = at.Cells[cell] * at.Weights[(cell * k) + z] * at.Patterns[(((_shape.DecisionOf(cell) * k) + z) * patterns) + pattern];
                    whole += shares[i];
                }

                for (int i = 0; i < cells.Length && whole > 0; i++)
                {
                    double count = flow[z] * shares[i] / whole;
                    Counts.Weights[(cells[i] * k) + z] += count;
                    Counts.Patterns[(((_shape.DecisionOf(cells[i]) * k) + z) * patterns) + pattern] += count;
                }
            }
        }
    }
}
