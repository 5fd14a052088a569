using MathNet.Numerics;

namespace Evenhand.Circuits.Profiles;

/// <summary>The drift circuit: an observed Chow–Liu tree whose special codes (missing, unlisted, declined) are values, kept as integer counts.</summary>
/// <remarks>
/// Counts of two stretches of time add up to the counts of both, to the last bit. The divergence of two of them is exact and falls
/// apart by field: KL(p ‖ q) = Σ over fields of Σ p(parent, x) ln(p(x | parent) / q(x | parent)).
/// </remarks>
public sealed class DriftCircuit
{
    private readonly int[] _parents;
    private readonly int[] _states;
    private readonly int[] _first;

    /// <summary>An empty one.</summary>
    /// <param name="parents">The parent of each column, −1 for roots.</param>
    /// <param name="states">The codes of each column, special ones among them.</param>
    public DriftCircuit(IReadOnlyList<int> parents, IReadOnlyList<int> states)
    {
        ArgumentNullException.ThrowIfNull(parents);
        ArgumentNullException.ThrowIfNull(states);
        _parents = [.. parents];
        _states = [.. states];
        _first = new int[_parents.Length + 1];
        for (int f = 0; f < _parents.Length; f++)
        {
            _first[f + 1] = checked(_first[f] + (_states[f] * (_parents[f] < 0 ? 1 : _states[_parents[f]])));
        }

        Counts = new long[_first[^1]];
    }

    /// <summary>By column, then by parent's code, then by own code: records.</summary>
    public long[] Counts { get; }

    /// <summary>Adds a record.</summary>
    /// <param name="codes">The code of each column.</param>
    public void Add(ReadOnlySpan<ushort> codes)
    {
        for (int f = 0; f < _parents.Length; f++)
        {
            int row = _parents[f] < 0 ? 0 : codes[_parents[f]];
            Counts[_first[f] + (row * _states[f]) + codes[f]]++;
        }
    }

    /// <summary>Adds the counts of another of the same columns.</summary>
    public void Add(DriftCircuit other)
    {
        ArgumentNullException.ThrowIfNull(other);
        for (int i = 0; i < Counts.Length; i++)
        {
            Counts[i] += other.Counts[i];
        }
    }

    /// <summary>How far this one is from a sample, column by column.</summary>
    /// <param name="sample">The sample's counts.</param>
    public FieldDrift[] Against(DriftCircuit sample)
    {
        ArgumentNullException.ThrowIfNull(sample);
        return [.. Enumerable.Range(0, _parents.Length).Select(f => Of(f, sample))];
    }

    /// <summary>
    /// The divergence of a column's conditionals, and the likelihood-ratio (G) test that both stretches have the same (R. R. Sokal and F. J.
    /// Rohlf, "Biometry", section 17.4).
    /// </summary>
    private FieldDrift Of(int field, DriftCircuit sample)
    {
        int states = _states[field], rows = (_first[field + 1] - _first[field]) / states;
        double divergence = 0, g = 0, n = 0, m = 0;
        int freedom = 0;
        for (int row = 0; row < rows; row++)
        {
            ReadOnlySpan<long> own = Counts.AsSpan(_first[field] + (row * states), states), theirs = sample.Counts.AsSpan(_first[field] + (row * states), states);
            double here = Sum(own), there = Sum(theirs);
            (n, m) = (n + here, m + there);
            int seen = 0;
            for (int x = 0; x < states; x++)
            {
                double both = own[x] + theirs[x];
                seen += both > 0 ? 1 : 0;
                if (own[x] > 0)
                {
                    // What the sample has never seen counts as half a record there.
                    double expected = (theirs[x] + (theirs[x] == 0 ? 0.5 : 0)) / (there + (there == 0 ? 0.5 * states : 0));
                    divergence += own[x] * Math.Log(own[x] / here / expected);
                }

                if (here > 0 && there > 0)
                {
                    g += Term(own[x], both * here / (here + there)) + Term(theirs[x], both * there / (here + there));
                }
            }

            freedom += here > 0 && there > 0 ? Math.Max(0, seen - 1) : 0;
        }

        double kl = n == 0 ? double.NaN : divergence / n;
        double excess = n == 0 || m == 0 ? 0 : freedom / 2.0 * ((1 / n) + (1 / m));
        double p = freedom == 0 ? double.NaN : SpecialFunctions.GammaUpperRegularized(freedom / 2.0, Math.Max(0, g) / 2);
        return new FieldDrift(field, kl, kl - excess, g, freedom, p);
    }

    private static double Sum(ReadOnlySpan<long> counts)
    {
        double sum = 0;
        foreach (long count in counts)
        {
            sum += count;
        }

        return sum;
    }

    private static double Term(double seen, double expected) => seen > 0 ? 2 * seen * Math.Log(seen / expected) : 0;
}
