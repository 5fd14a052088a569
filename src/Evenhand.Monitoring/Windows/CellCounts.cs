namespace Evenhand.Monitoring.Windows;

/// <summary>The decisions of one cell by outcome.</summary>
/// <param name="counts">The seven integers of <see cref="SumLayout.CountWidth"/>.</param>
public readonly struct CellCounts(ReadOnlyMemory<long> counts)
{
    private readonly ReadOnlyMemory<long> _counts = counts;

    /// <summary>Unfavourable decisions.</summary>
    public long Unfavourable => Sum(0, 3);

    /// <summary>Favourable decisions.</summary>
    public long Favourable => Sum(3, 3);

    /// <summary>Favourable and unfavourable decisions.</summary>
    public long Decided => Sum(0, 6);

    /// <summary>Decisions that are neither.</summary>
    public long Other => _counts.Span[6];

    /// <summary>Decided records with a positive outcome.</summary>
    public long Positive => _counts.Span[1] + _counts.Span[4];

    /// <summary>Decided records with a negative outcome.</summary>
    public long Negative => _counts.Span[2] + _counts.Span[5];

    /// <summary>Favourable decisions with a positive outcome.</summary>
    public long FavourablePositive => _counts.Span[4];

    /// <summary>Favourable decisions with a negative outcome.</summary>
    public long FavourableNegative => _counts.Span[5];

    /// <summary>Unfavourable decisions whose outcome is not known.</summary>
    public long UnfavourableUnknown => _counts.Span[0];

    private long Sum(int from, int length)
    {
        long sum = 0;
        foreach (long count in _counts.Span.Slice(from, length))
        {
            sum += count;
        }

        return sum;
    }
}
