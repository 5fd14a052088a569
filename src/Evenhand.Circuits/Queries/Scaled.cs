namespace Evenhand.Circuits.Queries;

/// <summary>A number m · 2^e that neither underflows nor overflows, however many probabilities are multiplied.</summary>
/// <remarks>
/// The exponent moves in steps of 512 and only when the mantissa leaves 2^±500, so that ordinary circuits are evaluated in plain double
/// arithmetic: logarithms would lose digits and cost many times more.
/// </remarks>
/// <param name="Mantissa">The mantissa; 0 with exponent 0 for nothing.</param>
/// <param name="Exponent">The exponent, a multiple of 512.</param>
public readonly record struct Scaled(double Mantissa, int Exponent)
{
    private const int Step = 512;
    private const double Large = 3.2733906078961419e150;
    private const double Small = 3.0549363634996047e-151;
    private static readonly double Up = Math.ScaleB(1, Step);
    private static readonly double Down = Math.ScaleB(1, -Step);

    /// <summary>Nothing.</summary>
    public static Scaled Zero => default;

    /// <summary>One.</summary>
    public static Scaled One => new(1, 0);

    /// <summary>Whether it is nothing.</summary>
    public bool IsZero => Mantissa == 0;

    /// <summary>The natural logarithm; −∞ of nothing, NaN of a negative number.</summary>
    public double Log => Mantissa == 0 ? double.NegativeInfinity : Math.Log(Mantissa) + (Exponent * Math.Log(2));

    /// <summary>The number as a double: 0 or infinite where it is out of range.</summary>
    public double ToDouble() => Math.ScaleB(Mantissa, Exponent);

    /// <summary>The number of a double.</summary>
    public static Scaled Of(double value) => Normal(value, 0);

    /// <summary>The product.</summary>
    public static Scaled operator *(Scaled a, Scaled b) => Normal(a.Mantissa * b.Mantissa, unchecked(a.Exponent + b.Exponent));

    /// <summary>The product with a plain number.</summary>
    public static Scaled operator *(double a, Scaled b) => Of(a) * b;

    /// <summary>The quotient; the divisor must not be nothing.</summary>
    public static Scaled operator /(Scaled a, Scaled b) => Normal(a.Mantissa / b.Mantissa, unchecked(a.Exponent - b.Exponent));

    /// <summary>The sum.</summary>
    public static Scaled operator +(Scaled a, Scaled b)
    {
        if (a.Exponent == b.Exponent)
        {
            return Normal(a.Mantissa + b.Mantissa, a.Exponent);
        }

        if (a.IsZero || b.IsZero)
        {
            return a.IsZero ? b : a;
        }

        (Scaled large, Scaled small) = a.Exponent > b.Exponent ? (a, b) : (b, a);
        int apart = unchecked(small.Exponent - large.Exponent);
        return Normal(large.Mantissa + Math.ScaleB(small.Mantissa, Math.Max(apart, -2 * Step * 2)), large.Exponent);
    }

    /// <summary>The product; as <c>*</c>.</summary>
    public static Scaled Multiply(Scaled left, Scaled right) => left * right;

    /// <summary>The quotient; as <c>/</c>.</summary>
    public static Scaled Divide(Scaled left, Scaled right) => left / right;

    /// <summary>The sum; as <c>+</c>.</summary>
    public static Scaled Add(Scaled left, Scaled right) => left + right;

    /// <summary>Whether a number above or equal to nothing is greater than another.</summary>
    public bool IsAbove(Scaled other) =>
        Exponent == other.Exponent || IsZero || other.IsZero ? Mantissa > other.Mantissa : Exponent > other.Exponent;

    private static Scaled Normal(double mantissa, int exponent)
    {
        double size = Math.Abs(mantissa);
        if (size >= Small && size <= Large)
        {
            return new Scaled(mantissa, exponent);
        }

        if (size == 0)
        {
            return default;
        }

        if (!double.IsFinite(size))
        {
            return new Scaled(mantissa, exponent);
        }

        while (Math.Abs(mantissa) < Small)
        {
            (mantissa, exponent) = (mantissa * Up, unchecked(exponent - Step));
        }

        while (Math.Abs(mantissa) > Large)
        {
            (mantissa, exponent) = (mantissa * Down, unchecked(exponent + Step));
        }

        return new Scaled(mantissa, exponent);
    }
}
