using Evenhand.Statistics.Intervals;
using Evenhand.Testing;

namespace Evenhand.Statistics.Tests.Cases;

/// <summary>Means and their differences against tests/data/cases/public_cases.json; each difference cites the case's source.</summary>
public sealed class MeanCaseTests
{
    private readonly CaseComparison _comparison = new();

    [Fact]
    public void Moments_NistReferenceDatasets_Agree()
    {
        foreach (ReferenceCase c in ReferenceCases.Load("summary_statistics"))
        {
            CsvTable table = CsvTable.Load(c.Input.GetProperty("csv").GetString()!);
            Moments moments = Moments.Of(table.Numbers("y", _ => true));
            Assert.Equal(c.Count("n"), moments.Count);
            _comparison.Number(c, "mean", moments.Mean);
            _comparison.Number(c, "sd_n_minus_1", Math.Sqrt(moments.Variance));
        }

        AssertAgreement(compared: 5 * 2);
    }

    [Theory]
    [InlineData("age_by_sex", "age", "sex=male", "sex=female")]
    [InlineData("amount_by_sex", "amount_dm", "sex=male", "sex=female")]
    [InlineData("duration_by_class", "duration_months", "class=Bad", "class=Good")]
    [InlineData("score_by_sex", "score_good", "sex=male", "sex=female")]
    public void StandardizedMeanDifference_CreditRecords_Agrees(string name, string column, string first, string second)
    {
        ReferenceCase c = ReferenceCases.Load("smd").Single();
        CsvTable table = CsvTable.Load(c.Input.GetProperty("csv").GetString()!);
        Moments m1 = Moments.Of(table.Numbers(column, row => table.Matches(row, first)));
        Moments m2 = Moments.Of(table.Numbers(column, row => table.Matches(row, second)));
        ReferenceCase part = c with { Id = c.Id + "." + name, Expected = c.Expected.GetProperty(name) };
        _comparison.Number(part, "mean1", m1.Mean);
        _comparison.Number(part, "mean2", m2.Mean);
        _comparison.Number(part, "sd1", Math.Sqrt(m1.Variance));
        _comparison.Number(part, "sd2", Math.Sqrt(m2.Variance));
        _comparison.Number(part, "smd_avgvar", StandardizedMeanDifference.Of(m1, m2, 0.95).Value);
        AssertAgreement(compared: 5);
    }

    private void AssertAgreement(int compared)
    {
        Assert.True(_comparison.Differences.Length == 0, _comparison.Differences);
        Assert.Equal(compared, _comparison.Compared);
    }
}
