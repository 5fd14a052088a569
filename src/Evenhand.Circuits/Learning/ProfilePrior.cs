using Evenhand.Circuits.Profiles;

namespace Evenhand.Circuits.Learning;

/// <summary>Dirichlet priors of a profile circuit, and the likeliest parameters under them and given counts.</summary>
/// <remarks>
/// Each conditional distribution backs off to a base: a field's values to its margin, a cell's profiles to all cells', a hidden state's
/// successors to all alike. The bases are held for as long as an objective is to be compared.
/// </remarks>
internal sealed class ProfilePrior
{
    private readonly ProfileShape _shape;
    private readonly double _pseudo;
    private readonly double[][] _margins;
    private readonly double[] _profiles;
    private readonly double[] _patterns;

    /// <summary>Takes the bases from what has been learned so far.</summary>
    /// <param name="shape">The shape.</param>
    /// <param name="pseudo">Pseudo-records an entry.</param>
    /// <param name="margins">By field the share of each value.</param>
    /// <param name="counts">Counts so far; null for none.</param>
    public ProfilePrior(ProfileShape shape, double pseudo, double[][] margins, ProfileStatistics? counts)
    {
        _shape = shape;
        _pseudo = pseudo;
        _margins = margins;
        int k = shape.Profiles;
        _profiles = new double[k];
        _patterns = new double[shape.Decisions * shape.PatternCount];
        for (int i = 0; i < shape.CellCount * k; i++)
        {
            _profiles[i % k] += counts?.Counts.Weights[i] ?? 1;
        }

        for (int i = 0; i < shape.Decisions * k * shape.PatternCount; i++)
        {
            int decision = i / (k * shape.PatternCount);
            _patterns[(decision * shape.PatternCount) + (i % shape.PatternCount)] += (counts?.Counts.Patterns[i] ?? 0) + (1.0 / k);
        }

        Normalise(_profiles, 1, k);
        for (int d = 0; d < shape.Decisions; d++)
        {
            Normalise(_patterns.AsSpan(d * shape.PatternCount, shape.PatternCount));
        }
    }

    /// <summary>The parameters of greatest posterior density given counts (a pseudo-record of x is a Dirichlet exponent of x).</summary>
    public ProfileParameters Likeliest(ProfileStatistics statistics)
    {
        int k = _shape.Profiles, patterns = _shape.PatternCount;
        ProfileParameters p = ProfileParameters.Zero(_shape), n = statistics.Counts;
        for (int cell = 0; cell < _shape.CellCount; cell++)
        {
            Span<double> weights = p.Weights.AsSpan(cell * k, k);
            for (int z = 0; z < k; z++)
            {
                double count = n.Weights[(cell * k) + z];
                p.Cells[cell] += count;
                weights[z] = count + (_pseudo * k * _profiles[z]);
            }

            p.Cells[cell] += _pseudo;
            Normalise(weights);
        }

        Normalise(p.Cells);
        for (int i = 0; i < _shape.Decisions * k; i++)
        {
            Span<double> row = p.Patterns.AsSpan(i * patterns, patterns);
            for (int r = 0; r < patterns; r++)
            {
                row[r] = n.Patterns[(i * patterns) + r] + (_pseudo * patterns * _patterns[(i / k * patterns) + r]);
            }

            Normalise(row);
        }

        for (int f = 0; f < _shape.Fields.Count; f++)
        {
            SetField(p, n, f);
        }

        return p;
    }

    /// <summary>The logarithm of the prior density of parameters, up to a constant.</summary>
    public double LogDensity(ProfileParameters p)
    {
        int k = _shape.Profiles, patterns = _shape.PatternCount;
        double sum = 0;
        foreach (double cell in p.Cells)
        {
            sum += _pseudo * Math.Log(cell);
        }

        for (int i = 0; i < p.Weights.Length; i++)
        {
            sum += _pseudo * k * _profiles[i % k] * Math.Log(p.Weights[i]);
        }

        for (int i = 0; i < p.Patterns.Length; i++)
        {
            double weight = _pseudo * patterns * _patterns[(i / (k * patterns) * patterns) + (i % patterns)];
            sum += weight > 0 ? weight * Math.Log(p.Patterns[i]) : 0;
        }

        for (int f = 0; f < _shape.Fields.Count; f++)
        {
            for (int i = 0; i < p.Emissions[f].Length; i++)
            {
                sum += _pseudo * _margins[f].Length * _margins[f][i / k] * Math.Log(p.Emissions[f][i]);
            }

            foreach (double a in p.Transitions[f])
            {
                sum += _pseudo * Math.Log(a);
            }
        }

        return sum;
    }

    private void SetField(ProfileParameters p, ProfileParameters n, int field)
    {
        int k = _shape.Profiles, states = _margins[field].Length;
        for (int z = 0; z < k; z++)
        {
            double sum = 0;
            for (int x = 0; x < states; x++)
            {
                double value = n.Emissions[field][(x * k) + z] + (_pseudo * states * _margins[field][x]);
                p.Emissions[field][(x * k) + z] = value;
                sum += value;
            }

            for (int x = 0; x < states; x++)
            {
                p.Emissions[field][(x * k) + z] /= sum;
            }
        }

        double[] a = p.Transitions[field];
        for (int j = 0; j < a.Length / k; j++)
        {
            Span<double> row = a.AsSpan(j * k, k);
            for (int i = 0; i < k; i++)
            {
                row[i] = n.Transitions[field][(j * k) + i] + _pseudo;
            }

            Normalise(row);
        }
    }

    private static void Normalise(double[] numbers, int rows, int length)
    {
        for (int r = 0; r < rows; r++)
        {
            Normalise(numbers.AsSpan(r * length, length));
        }
    }

    private static void Normalise(Span<double> numbers)
    {
        double sum = 0;
        foreach (double x in numbers)
        {
            sum += x;
        }

        for (int i = 0; i < numbers.Length; i++)
        {
            numbers[i] /= sum;
        }
    }
}
