using MathNet.Numerics;

namespace Evenhand.Circuits.Structure;

/// <summary>The numbers of a normal leaf: mean, standard deviation, and the ends [low, high] that it is cut off at and normalised over.</summary>
/// <remarks>A deviation of 0 stands for a number that is known: all mass is at the mean.</remarks>
/// <param name="Mean">Mean before cutting off.</param>
/// <param name="Deviation">Standard deviation before cutting off; 0 for a known number.</param>
/// <param name="Low">Lower end, −∞ for none.</param>
/// <param name="High">Upper end, +∞ for none.</param>
public readonly record struct Gaussian(double Mean, double Deviation, double Low = double.NegativeInfinity, double High = double.PositiveInfinity)
{
    /// <summary>How many numbers a leaf keeps.</summary>
    internal const int ParameterCount = 4;

    private static readonly double RootTwo = Math.Sqrt(2);

    /// <summary>The leaf of some numbers.</summary>
    internal static Gaussian Of(ReadOnlySpan<double> parameters) => new(parameters[0], parameters[1], parameters[2], parameters[3]);

    /// <summary>Whether all mass is at the mean.</summary>
    public bool IsPoint => Deviation == 0;

    /// <summary>The density at a number; for a known number 1 there and 0 elsewhere.</summary>
    public double DensityAt(double x)
    {
        if (IsPoint)
        {
            return x == Mean ? 1 : 0;
        }

        double z = (x - Mean) / Deviation;
        return x < Low || x > High ? 0 : Math.Exp(-z * z / 2) / (Deviation * Math.Sqrt(2 * Math.PI)) / Whole;
    }

    /// <summary>The natural logarithm of the density at a number.</summary>
    public double LogDensityAt(double x)
    {
        if (IsPoint)
        {
            return x == Mean ? 0 : double.NegativeInfinity;
        }

        double z = (x - Mean) / Deviation;
        return x < Low || x > High
            ? double.NegativeInfinity
            : (-z * z / 2) - Math.Log(Deviation) - (Math.Log(2 * Math.PI) / 2) - Math.Log(Whole);
    }

    /// <summary>The probability of [low, high).</summary>
    public double Mass(double low, double high)
    {
        if (IsPoint)
        {
            return Mean >= low && Mean < high ? 1 : 0;
        }

        return Between(Math.Max(low, Low), Math.Min(high, High)) / Whole;
    }

    /// <summary>The leaf cut off to [low, high) as well; the mass there must not be 0.</summary>
    public Gaussian Within(double low, double high) =>
        IsPoint ? this : this with { Low = Math.Max(low, Low), High = Math.Min(high, High) };

    /// <summary>The integral of (x − centre)^power over [low, high) under the leaf; power 0, 1 or 2.</summary>
    /// <remarks>Moments of the truncated normal: N. L. Johnson, S. Kotz and N. Balakrishnan, "Continuous Univariate Distributions" 1 (1994), section 13.10.1.</remarks>
    public double Moment(int power, double centre, double low, double high)
    {
        double mass = Mass(low, high);
        if (power == 0 || mass == 0)
        {
            return power == 0 ? mass : 0;
        }

        if (IsPoint)
        {
            return Math.Pow(Mean - centre, power);
        }

        double a = (Math.Max(low, Low) - Mean) / Deviation, b = (Math.Min(high, High) - Mean) / Deviation;
        double whole = Whole;
        double first = (Standard(a) - Standard(b)) / whole;
        double shift = Mean - centre;
        if (power == 1)
        {
            return (shift * mass) + (Deviation * first);
        }

        double second = mass + ((Edge(a) - Edge(b)) / whole);
        return (shift * shift * mass) + (2 * shift * Deviation * first) + (Deviation * Deviation * second);
    }

    private double Whole => double.IsNegativeInfinity(Low) && double.IsPositiveInfinity(High) ? 1 : Between(Low, High);

    private static double Standard(double z) => double.IsInfinity(z) ? 0 : Math.Exp(-z * z / 2) / Math.Sqrt(2 * Math.PI);

    private static double Edge(double z) => double.IsInfinity(z) ? 0 : z * Standard(z);

    /// <summary>The normal probability between two numbers, from the tail on the side that does not cancel.</summary>
    private double Between(double low, double high)
    {
        if (!(low < high))
        {
            return 0;
        }

        double a = (low - Mean) / Deviation / RootTwo, b = (high - Mean) / Deviation / RootTwo;
        if (a > 0)
        {
            return (SpecialFunctions.Erfc(a) - SpecialFunctions.Erfc(b)) / 2;
        }

        return b < 0
            ? (SpecialFunctions.Erfc(-b) - SpecialFunctions.Erfc(-a)) / 2
            : (SpecialFunctions.Erf(b) - SpecialFunctions.Erf(a)) / 2;
    }
}
