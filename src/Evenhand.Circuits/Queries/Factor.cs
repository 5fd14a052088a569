using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Queries;

/// <summary>A function of one variable that a leaf is multiplied by and summed or integrated with: evidence, or a power of the variable.</summary>
public sealed class Factor
{
    private readonly double[]? _weights;
    private readonly double _low = double.NegativeInfinity;
    private readonly double _high = double.PositiveInfinity;
    private readonly double? _point;
    private readonly int _power;
    private readonly double _centre;

    private Factor(double[] weights) => _weights = weights;

    private Factor(double low, double high, double? point, int power, double centre) =>
        (_low, _high, _point, _power, _centre) = (low, high, point, power, centre);

    /// <summary>A number for each state; 0 and 1 for evidence.</summary>
    public static Factor OfStates(params IEnumerable<double> weights) => new([.. weights]);

    /// <summary>A continuous number in [low, high).</summary>
    public static Factor Between(double low, double high) => new(low, high, null, 0, 0);

    /// <summary>A continuous number that is known: the leaf's density there.</summary>
    public static Factor At(double value) => new(double.NegativeInfinity, double.PositiveInfinity, value, 0, 0);

    /// <summary>(x − centre)^power of a continuous number; power 0, 1 or 2.</summary>
    public static Factor Power(int power, double centre) => new(double.NegativeInfinity, double.PositiveInfinity, null, power, centre);

    /// <summary>Both factors together.</summary>
    public Factor And(Factor other)
    {
        ArgumentNullException.ThrowIfNull(other);
        if (_weights is not null)
        {
            return OfStates(_weights.Zip(other._weights!, (a, b) => a * b));
        }

        bool clash = _point is { } p && other._point is { } q && p != q;
        double low = Math.Max(_low, other._low), high = Math.Min(_high, other._high);
        return clash
            ? Between(0, 0)
            : new Factor(low, high, _point ?? other._point, _power + other._power, _power > 0 ? _centre : other._centre);
    }

    /// <summary>The sum or integral of the leaf times the factor.</summary>
    internal Scaled Of(Circuit circuit, int leaf)
    {
        ReadOnlySpan<double> p = circuit.ParametersOf(leaf);
        if (circuit.KindOf(leaf) == NodeKind.Gaussian)
        {
            return OfGaussian(Gaussian.Of(p));
        }

        double sum = 0;
        for (int s = 0; s < p.Length; s++)
        {
            sum += _weights![s] * p[s];
        }

        return Scaled.Of(sum);
    }

    /// <summary>The leaf times the factor, unnormalised, state by state.</summary>
    internal double AtState(int state) => _weights![state];

    /// <summary>A normal leaf given the factor, which must be evidence.</summary>
    internal Gaussian Given(Gaussian leaf) => _point is { } x ? new Gaussian(x, 0) : leaf.Within(_low, _high);

    /// <summary>The integral of a normal leaf times the factor.</summary>
    internal Scaled OfGaussian(Gaussian leaf)
    {
        if (_point is not { } x)
        {
            return Scaled.Of(leaf.Moment(_power, _centre, _low, _high));
        }

        double value = Math.Pow(x - _centre, _power);
        bool isInside = x >= _low && x < _high;

        // A density far out in the tail underflows where its logarithm does not.
        double log = leaf.LogDensityAt(x);
        int steps = (int)Math.Max(0, -log / Math.Log(2) / 500);
        return !isInside || double.IsNegativeInfinity(log)
            ? Scaled.Zero
            : value * Split(log, steps);
    }

    private static Scaled Split(double log, int steps)
    {
        Scaled result = Scaled.One;
        for (int i = 0; i <= steps; i++)
        {
            result *= Scaled.Of(Math.Exp(log / (steps + 1)));
        }

        return result;
    }
}
