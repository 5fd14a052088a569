namespace Evenhand.Monitoring.Disclosure;

/// <summary>Homogeneous linear equations over some unknowns: tells which unknowns they determine once their right-hand sides are known.</summary>
/// <remarks>
/// <para>Elimination is exact, in the integers modulo the prime 2⁶¹ − 1. The coefficients are small whole numbers, so a rank could come out
/// wrong only if a minor were a non-zero multiple of the prime, which tables of a size that can be published do not have in practice.</para>
/// <para>Rows are sparse, and each is solved for the unknown that stands in the fewest others (H. M. Markowitz, "The Elimination Form of
/// the Inverse", Management Science 3 (1957) 255–269), because margins of tables fill in little that way.</para>
/// </remarks>
internal sealed class LinearSystem
{
    private const ulong Prime = (1UL << 61) - 1;

    private readonly List<Dictionary<int, ulong>> _rows = [];
    private readonly Dictionary<int, HashSet<int>> _rowsOf = [];

    /// <summary>Adds an equation, by unknown and coefficient.</summary>
    public void Add(IEnumerable<KeyValuePair<int, long>> coefficients)
    {
        Dictionary<int, ulong> row = coefficients
            .Where(c => c.Value != 0)
            .ToDictionary(c => c.Key, c => c.Value >= 0 ? (ulong)c.Value : Prime - (ulong)-c.Value);
        if (row.Count == 0)
        {
            return;
        }

        foreach (int unknown in row.Keys)
        {
            RowsOf(unknown).Add(_rows.Count);
        }

        _rows.Add(row);
    }

    /// <summary>The unknowns that the equations determine: those alone in a row once the system is reduced. Call once.</summary>
    public IEnumerable<int> Determined()
    {
        // Short rows first: they spread least into others.
        PriorityQueue<int, (int Length, int Row)> next = new(_rows.Select((row, i) => (i, (row.Count, i))));
        HashSet<int> solved = [];
        while (next.TryDequeue(out int i, out (int Length, int Row) when))
        {
            if (_rows[i].Count > when.Length && !solved.Contains(i))
            {
                next.Enqueue(i, (_rows[i].Count, i));
            }
            else if (_rows[i].Count > 0 && solved.Add(i))
            {
                Solve(i);
            }
        }

        return _rows.Where(r => r.Count == 1).Select(r => r.Keys.First()).ToList();
    }

    private HashSet<int> RowsOf(int unknown)
    {
        if (!_rowsOf.TryGetValue(unknown, out HashSet<int>? rows))
        {
            rows = [];
            _rowsOf.Add(unknown, rows);
        }

        return rows;
    }

    /// <summary>Solves a row for one unknown and takes that unknown out of every other row.</summary>
    private void Solve(int i)
    {
        Dictionary<int, ulong> row = _rows[i];
        int pivot = row.Keys.MinBy(u => (RowsOf(u).Count, u));
        ulong inverse = Inverse(row[pivot]);
        foreach (int other in RowsOf(pivot).Where(r => r != i).ToList())
        {
            Subtract(other, row, Multiply(_rows[other][pivot], inverse));
        }
    }

    private void Subtract(int target, Dictionary<int, ulong> row, ulong times)
    {
        Dictionary<int, ulong> into = _rows[target];
        foreach ((int unknown, ulong coefficient) in row)
        {
            ulong product = Multiply(times, coefficient);
            ulong before = into.GetValueOrDefault(unknown);
            ulong after = before >= product ? before - product : before + Prime - product;
            if (after == 0)
            {
                into.Remove(unknown);
                RowsOf(unknown).Remove(target);
            }
            else
            {
                into[unknown] = after;
                RowsOf(unknown).Add(target);
            }
        }
    }

    private static ulong Multiply(ulong a, ulong b)
    {
        // 2⁶¹ is 1 modulo the prime: the high part is added to the low one.
        UInt128 product = (UInt128)a * b;
        ulong sum = (ulong)(product & Prime) + (ulong)(product >> 61);
        return sum >= Prime ? sum - Prime : sum;
    }

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
