namespace Evenhand.Statistics.HypothesisTests;

/// <summary>A two-way table of counts in row order, with the totals that expected counts come from.</summary>
internal readonly ref struct ContingencyTable
{
    private readonly ReadOnlySpan<long> _counts;
    private readonly int _columns;

    /// <summary>Views the counts as a table after checking them.</summary>
    public ContingencyTable(ReadOnlySpan<long> counts, int columns)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(columns, 1);
        if (counts.Length % columns != 0)
        {
            throw new ArgumentException($"{counts.Length} counts do not fill rows of {columns}.", nameof(counts));
        }

        foreach (long count in counts)
        {
            ArgumentChecks.Count(count, nameof(counts));
        }

        _counts = counts;
        _columns = columns;
    }

    /// <summary>Number of rows, empty ones included.</summary>
    public int Rows => _counts.Length / _columns;

    /// <summary>Degrees of freedom of independence; rows and columns without counts add none.</summary>
    public int DegreesOfFreedom()
    {
        int rows = 0;
        for (int row = 0; row < Rows; row++)
        {
            rows += RowTotal(row) > 0 ? 1 : 0;
        }

        int columns = 0;
        for (int column = 0; column < _columns; column++)
        {
            columns += ColumnTotal(column) > 0 ? 1 : 0;
        }

        return Math.Max(0, rows - 1) * Math.Max(0, columns - 1);
    }

    /// <summary>The count of one cell.</summary>
    public long Count(int row, int column) => _counts[(row * _columns) + column];

    /// <summary>The sum of one row.</summary>
    public long RowTotal(int row)
    {
        long total = 0;
        foreach (long count in _counts.Slice(row * _columns, _columns))
        {
            total += count;
        }

        return total;
    }

    /// <summary>The sum of one column.</summary>
    public long ColumnTotal(int column)
    {
        long total = 0;
        for (int row = 0; row < Rows; row++)
        {
            total += Count(row, column);
        }

        return total;
    }

    /// <summary>The sum of all cells.</summary>
    public long Total()
    {
        long total = 0;
        foreach (long count in _counts)
        {
            total += count;
        }

        return total;
    }
}
