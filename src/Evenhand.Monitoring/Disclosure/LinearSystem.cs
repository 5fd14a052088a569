namespace Evenhand.Monitoring.Disclosure;

/// <summary>Homogeneous linear equations over some unknowns: tells which unknowns they determine once their right-hand sides are known.</summary>
/// <remarks>
/// Elimination is exact, in the integers modulo the prime 2⁶¹ − 1. The coefficients are small whole numbers, so a rank could come out
/// wrong only if a minor were a non-zero multiple of the prime, which tables of a size that can be published do not have in practice.
/// </remarks>
internal sealed class LinearSystem(int unknowns)
{
    private const ulong Prime = (1UL << 61) - 1;

    private readonly List<(int Pivot, ulong[] Row)> _rows = [];

    /// <summary>Adds an equation, by unknown and coefficient.</summary>
    public void Add(IReadOnlyDictionary<int, long> coefficients)
    {
        ulong[] row = new ulong[unknowns];
        foreach ((int unknown, long coefficient) in coefficients)
        {
            row[unknown] = coefficient >= 0 ? (ulong)coefficient : Prime - (ulong)-coefficient;
        }

        foreach ((int pivot, ulong[] other) in _rows)
        {
            Subtract(row, other, row[pivot]);
        }

        int first = Array.FindIndex(row, c => c != 0);
        if (first < 0)
        {
            return;
        }

        Scale(row, Inverse(row[first]));
        foreach ((_, ulong[] other) in _rows)
        {
            Subtract(other, row, other[first]);
        }

        _rows.Add((first, row));
    }

    /// <summary>The unknowns that the equations determine: those alone in a reduced row.</summary>
    public IEnumerable<int> Determined() => _rows.Where(r => r.Row.Count(c => c != 0) == 1).Select(r => r.Pivot);

    private static void Subtract(ulong[] row, ulong[] other, ulong times)
    {
        if (times == 0)
        {
            return;
        }

        for (int i = 0; i < row.Length; i++)
        {
            if (other[i] != 0)
            {
                ulong product = Multiply(times, other[i]);
                row[i] = row[i] >= product ? row[i] - product : row[i] + Prime - product;
            }
        }
    }

    private static void Scale(ulong[] row, ulong factor)
    {
        for (int i = 0; i < row.Length; i++)
        {
            row[i] = Multiply(row[i], factor);
        }
    }

    private static ulong Multiply(ulong a, ulong b) => (ulong)((UInt128)a * b % Prime);

    /// <summary>The inverse, by Fermat: a to the power of the prime less two.</summary>
    private static ulong Inverse(ulong a)
    {
        ulong result = 1, power = a;
        for (ulong exponent = Prime - 2; exponent > 0; exponent >>= 1)
        {
            result = (exponent & 1) == 1 ? Multiply(result, power) : result;
            power = Multiply(power, power);
        }

        return result;
    }
}
