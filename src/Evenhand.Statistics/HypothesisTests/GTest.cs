using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.HypothesisTests;

/// <summary>
/// The log-likelihood ratio test of independence in a two-way table, G² = 2 Σ O ln(O/E) (Wilks, The likelihood test
/// of independence in contingency tables, Annals of Mathematical Statistics 6, 1935), without corrections.
/// </summary>
public static class GTest
{
    /// <summary>Tests rows against columns.</summary>
    /// <param name="counts">The cells in row order; length a multiple of <paramref name="columns"/>.</param>
    /// <param name="columns">Cells in a row, at least 1.</param>
    /// <returns>
    /// Zero cells add nothing; rows and columns without counts are left out, of the degrees of freedom too. NaN
    /// when fewer than two rows or columns remain.
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
                if (expected > 0)
                {
                    // Deviances add up to the same as O ln(O/E), since ΣO = ΣE, and none of them cancels.
                    sum += Stirling.Deviance(table.Count(row, column), expected);
                }
            }
        }

        return ChiSquareResult.Of(2 * sum, table.DegreesOfFreedom());
    }
}
