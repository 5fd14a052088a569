using Evenhand.Statistics.HypothesisTests;
using Evenhand.Statistics.Intervals;
using Evenhand.Testing;

namespace Evenhand.Statistics.Tests.Cases;

/// <summary>One and two proportions against tests/data/cases/public_cases.json; each difference cites the case's source.</summary>
public sealed class ProportionCaseTests
{
    private readonly CaseComparison _comparison = new();

    [Fact]
    public void SingleProportion_ReferenceCases_Agree()
    {
        foreach (ReferenceCase c in ReferenceCases.Load("interval_single"))
        {
            double level = c.Input.GetProperty("conf").GetDouble();
            Interval wilson = WilsonInterval.Of(c.Count("x"), c.Count("n"), level);
            Interval weighted = WilsonInterval.Of((double)c.Count("x") / c.Count("n"), c.Count("n"), level);
            Interval exact = ClopperPearson.Of(c.Count("x"), c.Count("n"), level);
            _comparison.Ends(c, "wilson", wilson.Low, wilson.High);
            _comparison.Ends(c, "wilson", weighted.Low, weighted.High);
            _comparison.Ends(c, "clopper_pearson", exact.Low, exact.High);
        }

        AssertAgreement(compared: 7 * 6);
    }

    [Fact]
    public void Difference_ReferenceCases_Agree()
    {
        foreach (ReferenceCase c in ReferenceCases.Load("interval_difference"))
        {
            Interval newcombe = NewcombeDifference.Of(
                c.Count("x1"), c.Count("n1"), c.Count("x2"), c.Count("n2"), c.Input.GetProperty("conf").GetDouble());
            _comparison.Ends(c, "newcombe", newcombe.Low, newcombe.High);
        }

        AssertAgreement(compared: 5 * 2);
    }

    [Fact]
    public void TwoGroups_CasesWithCounts_Agree()
    {
        foreach (ReferenceCase c in ReferenceCases.Load("two_group").Where(c => c.Input.TryGetProperty("x1", out _)))
        {
            CompareTwoGroups(c, c.Count("x1"), c.Count("n1"), c.Count("x2"), c.Count("n2"), c.Input.GetProperty("conf").GetDouble());
        }

        AssertAgreement(compared: (7 * 9) + 4);
    }

    [Fact]
    public void TwoGroups_CasesOverDataFiles_CountTheFileAndAgree()
    {
        foreach (ReferenceCase c in ReferenceCases.Load("two_group").Where(c => c.Input.TryGetProperty("csv", out _)))
        {
            (Func<CsvTable, string[], bool> @event, Func<CsvTable, string[], bool> first, Func<CsvTable, string[], bool> second) = Selection(c);
            CsvTable table = CsvTable.Load(c.Input.GetProperty("csv").GetString()!);
            long n1 = table.Rows.Count(row => first(table, row));
            long n2 = table.Rows.Count(row => second(table, row));
            long x1 = table.Rows.Count(row => first(table, row) && @event(table, row));
            long x2 = table.Rows.Count(row => second(table, row) && @event(table, row));
            _comparison.Value(c, "x1", x1, c.Expected.GetProperty("x1").GetInt64());
            _comparison.Value(c, "n1", n1, c.Expected.GetProperty("n1").GetInt64());
            _comparison.Value(c, "x2", x2, c.Expected.GetProperty("x2").GetInt64());
            _comparison.Value(c, "n2", n2, c.Expected.GetProperty("n2").GetInt64());
            CompareTwoGroups(c, x1, n1, x2, n2, level: 0.95);
        }

        AssertAgreement(compared: 10 * 18);
    }

    private void CompareTwoGroups(ReferenceCase c, long x1, long n1, long x2, long n2, double level)
    {
        TwoProportionZ pooled = PooledTwoProportionZ.Test(x1, n1, x2, n2);
        _comparison.Number(c, "z_pooled", pooled.Z);
        _comparison.Tail(c, "p_two_sided", pooled.P);
        _comparison.Tail(c, "p_pooled", pooled.P);
        double pearson = PearsonTest.Test([x1, n1 - x1, x2, n2 - x2], columns: 2).Statistic;
        _comparison.Number(c, "chisq", pearson);
        _comparison.Number(c, "chisq_nocc", pearson);
        Ends(c, "newcombe", NewcombeDifference.Of(x1, n1, x2, n2, level));
        Ends(c, "newcombe_diff", NewcombeDifference.Of(x1, n1, x2, n2, level));
        Ends(c, "katz", KatzRatio.Of(x1, n1, x2, n2, level));
        Ends(c, "katz_ratio", KatzRatio.Of(x1, n1, x2, n2, level));
        Ends(c, "woolf", WoolfOddsRatio.Of(x1, n1 - x1, x2, n2 - x2, level));
        Ends(c, "woolf_or", WoolfOddsRatio.Of(x1, n1 - x1, x2, n2 - x2, level));
        Ends(c, "wilson1", WilsonInterval.Of(x1, n1, level));
        Ends(c, "wilson2", WilsonInterval.Of(x2, n2, level));
        double fisher = FisherExact.TwoSided(x1, n1 - x1, x2, n2 - x2);
        _comparison.Tail(c, "fisher_p", fisher);
        if (c.TryExpected("fisher", out System.Text.Json.JsonElement nested))
        {
            _comparison.Value(c, "fisher.two_sided", fisher, nested.GetProperty("two_sided").GetDouble());
        }
    }

    private void Ends(ReferenceCase c, string name, Interval interval) => _comparison.Ends(c, name, interval.Low, interval.High);

    private static (Func<CsvTable, string[], bool> Event, Func<CsvTable, string[], bool> First, Func<CsvTable, string[], bool> Second) Selection(ReferenceCase c)
    {
        if (c.Input.TryGetProperty("comparison", out _))
        {
            // These cases describe the comparison in words.
            return c.Id switch
            {
                "german-sex-good" => (Is("class=Good"), Is("sex=male"), Is("sex=female")),
                "german-foreign-good" => (Is("class=Good"), Is("foreign_worker=0"), Is("foreign_worker=1")),
                "german-sex-decision" => (Is("decision=approve"), Is("sex=male"), Is("sex=female")),
                _ => throw new InvalidOperationException($"The case {c.Id} is worded in a way this test does not know."),
            };
        }

        Func<CsvTable, string[], bool> kept = Kept(c);
        Func<CsvTable, string[], bool> first = Is(c.Input.GetProperty("group1").GetString()!);
        Func<CsvTable, string[], bool> second = Is(c.Input.GetProperty("group2").GetString()!);
        return (
            Is(c.Input.GetProperty("event").GetString()!),
            (table, row) => kept(table, row) && first(table, row),
            (table, row) => kept(table, row) && second(table, row));
    }

    private static Func<CsvTable, string[], bool> Kept(ReferenceCase c)
    {
        if (c.Input.TryGetProperty("filter", out System.Text.Json.JsonElement filter))
        {
            string column = filter.GetString()!.Replace(" not empty", string.Empty, StringComparison.Ordinal);
            return (table, row) => table.Cell(row, column).Length > 0;
        }

        return c.Input.TryGetProperty("subset", out System.Text.Json.JsonElement subset) && subset.GetString() != "all"
            ? Is(subset.GetString()!)
            : (_, _) => true;
    }

    private static Func<CsvTable, string[], bool> Is(string condition) => (table, row) => table.Matches(row, condition);

    private void AssertAgreement(int compared)
    {
        Assert.True(_comparison.Differences.Length == 0, _comparison.Differences);
        Assert.Equal(compared, _comparison.Compared);
    }
}
