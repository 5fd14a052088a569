namespace Evenhand.Statistics.HypothesisTests;

/// <summary>
/// Pearson's chi-square test of independence in a two-way table, Σ (O − E)²/E (Pearson, On the criterion that a given
/// system of deviations…, Philosophical Magazine 50, 1900; degrees of freedom after Fisher, 1922), without continuity
/// correction.
/// </summary>
public static class PearsonTest
{
    /// <summary>Tests rows against columns.</summary>
    /// <param name="counts">The cells in row order; length a multiple of <paramref name="columns"/>.</param>
    /// <param name="columns">Cells in a row, at least 1.</param>
    /// <returns>
    /// Rows and columns without counts are left out, of the degrees of freedom too. NaN when fewer than two rows or
    /// columns remain.
    /// </returns>
    /// <exception cref="ArgumentOutOfRangeException">A count is negative or <paramref name="columns"/> is below 1.</exception>
    /// <exception cref="ArgumentException">The counts do not fill whole rows.</exception>
    public static ChiSquareResult Test(ReadOnlySpan<long> counts, int columns)
    {
        var table = new ContingencyTable(counts, columns);
        double total = table.Total();
        double sum = 0;
        for (int column = 0; column < columns; column++)
        {
            double columnTotal = table.ColumnTotal(column);
            for (int row = 0; row < table.Rows; row++)
            {
                double expected = table.RowTotal(row) * columnTotal / total;
                double difference = table.Count(row, column) - expected;
                sum += expected > 0 ? difference * difference / expected : 0;
            }
        }

        return ChiSquareResult.Of(sum, table.DegreesOfFreedom());
    }
}
