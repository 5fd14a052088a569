namespace Evenhand.Statistics.Distributions;

/// <summary>Finds where a falling function crosses zero, by widening a bracket and halving it down to one double.</summary>
internal static class MonotoneRoot
{
    // exp of this bound is still a normal double, so callers may work on logarithms.
    private const double Bound = 700;

    /// <summary>The crossing nearest to double precision, clamped to ±700.</summary>
    public static double Find<T>(in T function, double start)
        where T : struct, IFallingFunction
    {
        double low = Widen(function, start, -1);
        double high = Widen(function, start, 1);
        while (true)
        {
            double middle = 0.5 * (low + high);
            if (middle <= low || middle >= high)
            {
                return middle;
            }

            if (function.At(middle) > 0)
            {
                low = middle;
            }
            else
            {
                high = middle;
            }
        }
    }

    private static double Widen<T>(in T function, double start, int direction)
        where T : struct, IFallingFunction
    {
        double step = 0.5;
        double t = start;
        while (Math.Abs(t) < Bound && function.At(t) * direction > 0)
        {
            t = Math.Clamp(t + (direction * step), -Bound, Bound);
            step *= 2;
        }

        return t;
    }
}
