using System.Globalization;

namespace Evenhand.Circuits.Structure;

/// <summary>A variable of a circuit: a category, a number in bins, or a continuous number.</summary>
public sealed class Variable
{
    private readonly Dictionary<string, int> _states = new(StringComparer.Ordinal);

    private Variable(string name, VariableKind kind, IReadOnlyList<string> values, IReadOnlyList<double> edges, IReadOnlyList<double> centres)
    {
        ArgumentException.ThrowIfNullOrEmpty(name);
        Name = name;
        Kind = kind;
        Values = values;
        Edges = edges;
        Centres = centres;
        for (int i = 0; i < values.Count; i++)
        {
            if (!_states.TryAdd(values[i], i))
            {
                throw new ArgumentException($"variable {name}: the value {values[i]} stands twice", nameof(values));
            }
        }
    }

    /// <summary>The name.</summary>
    public string Name { get; }

    /// <summary>What values it takes.</summary>
    public VariableKind Kind { get; }

    /// <summary>The names of the states: a category's values, or its bins as <c>18..30</c>, <c>75..</c>, <c>..18</c>; none for a continuous number.</summary>
    public IReadOnlyList<string> Values { get; }

    /// <summary>Ends of the bins, ascending, the first and last possibly infinite; empty for categories and continuous numbers.</summary>
    public IReadOnlyList<double> Edges { get; }

    /// <summary>Means of the bins where they are given, NaN for those that have none; empty where none is given.</summary>
    public IReadOnlyList<double> Centres { get; }

    /// <summary>Number of states; 0 for a continuous number.</summary>
    public int StateCount => Values.Count;

    /// <summary>Whether it takes any real value.</summary>
    public bool IsContinuous => Kind == VariableKind.Number && Edges.Count == 0;

    /// <summary>Makes a category.</summary>
    /// <exception cref="ArgumentException">No value, or one stands twice.</exception>
    public static Variable Category(string name, IEnumerable<string> values)
    {
        string[] states = [.. values];
        return states.Length > 0
            ? new Variable(name, VariableKind.Category, states, [], [])
            : throw new ArgumentException($"variable {name}: has no values", nameof(values));
    }

    /// <summary>Makes a number in bins [edge, next edge).</summary>
    /// <param name="name">The name.</param>
    /// <param name="edges">At least two, strictly ascending; the first may be −∞, the last +∞.</param>
    /// <param name="centres">Means of the bins, NaN for none, or empty.</param>
    /// <exception cref="ArgumentException">Too few edges, edges out of order, or another number of centres than bins.</exception>
    public static Variable Binned(string name, IEnumerable<double> edges, IEnumerable<double>? centres = null)
    {
        double[] ends = [.. edges], means = [.. centres ?? []];
        if (ends.Length < 2)
        {
            throw new ArgumentException($"variable {name}: needs two edges or more", nameof(edges));
        }

        for (int i = 0; i < ends.Length; i++)
        {
            bool isInner = i > 0 && i < ends.Length - 1;
            if (double.IsNaN(ends[i]) || (isInner && double.IsInfinity(ends[i])) || (i > 0 && ends[i] <= ends[i - 1]))
            {
                throw new ArgumentException($"variable {name}: edges must ascend, and only the first and last may be open", nameof(edges));
            }
        }

        return means.Length == 0 || means.Length == ends.Length - 1
            ? new Variable(name, VariableKind.Number, [.. Enumerable.Range(0, ends.Length - 1).Select(b => BinName(ends[b], ends[b + 1]))], ends, means)
            : throw new ArgumentException($"variable {name}: has {ends.Length - 1} bins but {means.Length} centres", nameof(centres));
    }

    /// <summary>Makes a number that takes any real value.</summary>
    public static Variable Continuous(string name) => new(name, VariableKind.Number, [], [], []);

    /// <summary>The state of a name, or −1.</summary>
    public int StateOf(string value) => _states.GetValueOrDefault(value, -1);

    /// <summary>The bin that holds a number, or −1 where none does.</summary>
    public int BinOf(double number)
    {
        if (Edges.Count == 0 || !(number >= Edges[0]))
        {
            return -1;
        }

        int bin = 0;
        while (bin < StateCount && number >= Edges[bin + 1])
        {
            bin++;
        }

        return bin < StateCount ? bin : -1;
    }

    /// <summary>The mean that a bin stands for: its centre, else its middle; NaN for an open bin without a centre.</summary>
    public double CentreOf(int bin)
    {
        if (Centres.Count > 0 && !double.IsNaN(Centres[bin]))
        {
            return Centres[bin];
        }

        double middle = Edges[bin] + ((Edges[bin + 1] - Edges[bin]) / 2);
        return double.IsInfinity(Edges[bin]) || double.IsInfinity(Edges[bin + 1]) ? double.NaN : middle;
    }

    /// <summary>Whether another variable has the same name and takes the same values.</summary>
    public bool IsSameAs(Variable other)
    {
        ArgumentNullException.ThrowIfNull(other);
        return Name == other.Name && Kind == other.Kind && Values.SequenceEqual(other.Values) && Edges.SequenceEqual(other.Edges);
    }

    private static string BinName(double low, double high) => string.Create(
        CultureInfo.InvariantCulture,
        $"{(double.IsInfinity(low) ? "" : low.ToString("R", CultureInfo.InvariantCulture))}..{(double.IsInfinity(high) ? "" : high.ToString("R", CultureInfo.InvariantCulture))}");
}
