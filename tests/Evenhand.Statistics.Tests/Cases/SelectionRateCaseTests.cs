using System.Text.Json;
using Evenhand.Statistics.HypothesisTests;
using Evenhand.Statistics.Intervals;
using Evenhand.Testing;

namespace Evenhand.Statistics.Tests.Cases;

/// <summary>
/// Selection rates of tests/data/cases/public_cases.json. Rates and the choice of a reference group are no business of
/// this project; what it can be held to is that its ratio interval lies about the published impact ratio, and the
/// tests the cases carry.
/// </summary>
public sealed class SelectionRateCaseTests
{
    private readonly CaseComparison _comparison = new();

    [Fact]
    public void KatzInterval_ImpactRatioCases_CentresOnTheRatio()
    {
        foreach (ReferenceCase c in ReferenceCases.Load("four_fifths", "impact_ratio").Where(c => c.Input.TryGetProperty("groups", out _)))
        {
            JsonElement groups = c.Input.GetProperty("groups");
            string reference = c.Expected.GetProperty("reference_group")[0].GetString()!;
            (long x2, long n2) = Group(groups, reference);
            foreach (JsonProperty group in c.Expected.GetProperty("impact_ratio").EnumerateObject())
            {
                (long x1, long n1) = Group(groups, group.Name);
                Interval interval = KatzRatio.Of(x1, n1, x2, n2, 0.95);

                // The geometric centre carries the rounding of two more operations: compared to 4 units in the last place.
                double centre = Math.Sqrt(interval.Low) * Math.Sqrt(interval.High);
                double expected = group.Value.GetDouble();
                _comparison.Value(c with { Tolerance = new Tolerance(1e-15, 1e-15) }, "impact_ratio." + group.Name, centre, expected);
            }
        }

        AssertAgreement(compared: 2 + 2 + 2 + 2 + 14 + 2 + 14);
    }

    [Fact]
    public void Tests_FourFifthsCases_Agree()
    {
        foreach (ReferenceCase c in ReferenceCases.Load("four_fifths"))
        {
            (long x1, long n1) = Group(c.Input.GetProperty("groups"), "Black");
            (long x2, long n2) = Group(c.Input.GetProperty("groups"), "White");
            double fisher = FisherExact.TwoSided(x1, n1 - x1, x2, n2 - x2);
            _comparison.Number(c, "fisher_two_sided_p", fisher);
            _comparison.Number(c, "fisher_two_sided_p_exam", fisher);
            _comparison.Number(c, "z_exam", PooledTwoProportionZ.Test(x1, n1, x2, n2).Z);
        }

        AssertAgreement(compared: 3);
    }

    [Fact]
    public void Pearson_RateTestCases_Agree()
    {
        foreach (ReferenceCase c in ReferenceCases.Load("rate_tests").Where(c => c.TryExpected("chisq", out _)))
        {
            long[] x = c.Counts("x");
            long[] n = c.Counts("n");
            long[] table = [.. x.Zip(n, (events, size) => new[] { events, size - events }).SelectMany(row => row)];
            ChiSquareResult result = PearsonTest.Test(table, columns: 2);
            _comparison.Number(c, "chisq", result.Statistic);
            _comparison.Number(c, "df", result.DegreesOfFreedom);
            _comparison.Number(c, "p", result.P);
        }

        AssertAgreement(compared: 3);
    }

    /// <summary>Source: Castaneda v. Partida, 430 U.S. 482 (1977), 496 n. 17: "less than 1 in 10^140"; value from memory.</summary>
    [Fact]
    public void BinomialTail_JurySelection_IsBelowThePublishedBound()
    {
        ReferenceCase c = ReferenceCases.Load("rate_tests").Single(c => c.Id == "castaneda-1977-binomial");
        double p = BinomialTail.Lower(c.Count("observed"), c.Count("n"), c.Input.GetProperty("population_share").GetDouble());
        Assert.InRange(p, 1e-145, 1e-140);
    }

    private static (long Selected, long Applicants) Group(JsonElement groups, string name)
    {
        JsonElement group = groups.GetProperty(name);
        JsonElement selected = group.TryGetProperty("selected", out JsonElement found) ? found : group.GetProperty("above_median");
        return (selected.GetInt64(), group.GetProperty("applicants").GetInt64());
    }

    private void AssertAgreement(int compared)
    {
        Assert.True(_comparison.Differences.Length == 0, _comparison.Differences);
        Assert.Equal(compared, _comparison.Compared);
    }
}
