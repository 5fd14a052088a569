namespace Evenhand.Monitoring.Disclosure;

/// <summary>What a reader of a table may know of one of its counts.</summary>
public enum CellExposure
{
    /// <summary>Never published: the reader does not know it, and nothing protects it.</summary>
    Hidden = 0,

    /// <summary>Published unless it has to be withheld.</summary>
    Published = 1,

    /// <summary>Always published, such as a grand total.</summary>
    Required = 2,
}

/// <summary>The counts of a table and how they add up: what complementary suppression works on.</summary>
public sealed class SuppressionTable
{
    private readonly List<Item> _items = [];
    private readonly List<(int Total, int[] Parts)> _sums = [];

    /// <summary>Number of counts.</summary>
    public int Count => _items.Count;

    internal IReadOnlyList<(int Total, int[] Parts)> Sums => _sums;

    /// <summary>Adds a count.</summary>
    /// <param name="count">The count, at least 0.</param>
    /// <param name="exposure">Whether it is published.</param>
    /// <param name="isSensitive">Whether nobody may be able to work it out.</param>
    /// <returns>Its number, from 0.</returns>
    public int Add(long count, CellExposure exposure, bool isSensitive)
    {
        ArgumentOutOfRangeException.ThrowIfNegative(count);
        _items.Add(new Item(count, exposure, isSensitive));
        return _items.Count - 1;
    }

    /// <summary>States that a count is the sum of others; the reader knows that.</summary>
    public void AddSum(int total, IEnumerable<int> parts) => _sums.Add((total, [.. parts]));

    internal long CountOf(int item) => _items[item].Count;

    internal CellExposure ExposureOf(int item) => _items[item].Exposure;

    internal bool IsSensitive(int item) => _items[item].IsSensitive;

    private readonly record struct Item(long Count, CellExposure Exposure, bool IsSensitive);
}
