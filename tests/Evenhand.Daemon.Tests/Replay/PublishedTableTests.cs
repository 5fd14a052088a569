using System.Text.Json;
using Evenhand.Testing;
using Xunit.Abstractions;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>Published tables of counts, expanded to one row a person and replayed.</summary>
public sealed class PublishedTableTests(ITestOutputHelper output) : CaseTest(output)
{
    [Fact]
    public void TwoGroups_ReferenceCases_Agree()
    {
        List<ReferenceCase> cases = [.. ReferenceCases.Load("two_group").Where(c => c.Id.StartsWith("pair-", StringComparison.Ordinal))];
        foreach (ReferenceCase c in cases)
        {
            Pair(c, TwoGroups(c)).CompareCrude();
        }

        // Fisher's p is given for four of the seven.
        Assert.Equal(7, cases.Count);
        AssertAgreement((7 * 13) + 4);
    }

    [Fact]
    public void Differences_ReferenceCases_Agree()
    {
        IReadOnlyList<ReferenceCase> cases = ReferenceCases.Load("interval_difference");
        foreach (ReferenceCase c in cases)
        {
            Pair(c, TwoGroups(c)).CompareCrude();
        }

        Assert.Equal(5, cases.Count);
        AssertAgreement(5 * 3);
    }

    [Fact]
    public void Proportions_ReferenceCases_Agree()
    {
        IReadOnlyList<ReferenceCase> cases = ReferenceCases.Load("interval_single");
        foreach (ReferenceCase c in cases)
        {
            ReplayedSnapshot snapshot = new TableReplay { Level = Level(c) }
                .Add("one", c.Count("x"), c.Count("n") - c.Count("x"))
                .Add("two", 1, 1)
                .Run();
            Comparison.Number(c, "estimate", snapshot.Number("value", "selection_rate", "group", "one"));
            Comparison.Ends(c, "wilson", snapshot.Number("low", "selection_rate", "group", "one"), snapshot.Number("high", "selection_rate", "group", "one"));
        }

        Assert.Equal(7, cases.Count);
        AssertAgreement(7 * 3);
    }

    [Fact]
    public void FisherExact_ReferenceCases_Agree()
    {
        IReadOnlyList<ReferenceCase> cases = ReferenceCases.Load("fisher_exact");
        foreach (ReferenceCase c in cases)
        {
            JsonElement table = c.Input.GetProperty("table");
            long Cell(int row, int column) => table[row][column].GetInt64();
            double p = new TableReplay { Reference = "two" }.Add("one", Cell(0, 0), Cell(0, 1)).Add("two", Cell(1, 0), Cell(1, 1)).Run()
                .Number("p_value", "odds_ratio", "group", "one");
            Comparison.Tail(c, "two_sided", p);
            Comparison.Tail(c, "p_two_sided", p);
        }

        Assert.Equal(5, cases.Count);
        AssertAgreement(5);
    }

    [Theory]
    [InlineData("stratified", "mh-china-smoking", Adjusted)]
    [InlineData("stratified", "mh-rabbits-exact", 3)]
    [InlineData("simpson", "simpson-kidney-stones", Adjusted)]
    [InlineData("simpson", "simpson-death-penalty", Adjusted)]
    [InlineData("simpson", "simpson-whickham", Adjusted)]
    public void Strata_ReferenceCase_Agrees(string topic, string id, int compared)
    {
        ReferenceCase c = Case(topic, id);
        string[] strata = [.. c.Input.GetProperty("strata").EnumerateArray().Select(s => s.GetString()!)];
        TableReplay table = new() { Reference = "two" };
        for (int s = 0; s < strata.Length; s++)
        {
            table.Add("one", c.Counts("group1_event")[s], c.Counts("group1_nonevent")[s], strata[s]);
            table.Add("two", c.Counts("group2_event")[s], c.Counts("group2_nonevent")[s], strata[s]);
        }

        Pair(c, table.Run()).CompareAdjusted();
        AssertAgreement(compared);
    }

    [Fact]
    public void SelectionRates_ReferenceCases_Agree()
    {
        ReferenceCase uniform = Case("four_fifths", "ugesp-qa12-80-40");
        ReferenceCase small = Case("four_fifths", "ugesp-qa21-small-numbers");
        ReferenceCase teal = Case("four_fifths", "teal-1982");
        CompareSelection(uniform, Selection(uniform.Input.GetProperty("groups")));
        ReplayedSnapshot few = Selection(small.Input.GetProperty("groups"));
        CompareSelection(small, few);
        Comparison.Tail(small, "fisher_two_sided_p", few.Number("p_value", "odds_ratio", "group", "Black"));

        // The worked example moves one selection from the group with the higher rate to the other, which reverses the order.
        CompareSelection(small, new TableReplay().Add("White", 15, 65).Add("Black", 4, 16).Run(), "shifted");

        ReplayedSnapshot exam = Selection(teal.Input.GetProperty("groups"));
        CompareSelection(teal, exam);
        Comparison.Tail(teal, "fisher_two_sided_p_exam", exam.Number("p_value", "odds_ratio", "group", "Black"));
        Comparison.Number(teal, "z_exam", exam.Number("value", "rate_z", "group", "Black"));
        ReplayedSnapshot promotions = Selection(teal.Input.GetProperty("promotions"), "candidates", "promoted");
        CompareSelection(teal, promotions, "bottom_line");
        Comparison.Number(teal, "promotion_ratio_black_to_white", 1 / promotions.Number("value", "impact_ratio", "group", "White"));
        AssertAgreement((5 * 3) + 4);
    }

    private static ReplayedSnapshot Selection(JsonElement groups, string all = "applicants", string selected = "selected")
    {
        TableReplay table = new();
        foreach (JsonProperty group in groups.EnumerateObject())
        {
            long chosen = group.Value.GetProperty(selected).GetInt64();
            table.Add(group.Name, chosen, group.Value.GetProperty(all).GetInt64() - chosen);
        }

        return table.Run();
    }

    /// <summary>No reference is named: the group with the highest rate is taken, as the guidelines do, which the case names too.</summary>
    private void CompareSelection(ReferenceCase c, ReplayedSnapshot snapshot, params string[] at)
    {
        JsonElement expected = at.Aggregate(c.Expected, (node, key) => node.GetProperty(key));
        string reference = expected.GetProperty("reference_group")[0].GetString()!;
        foreach (string group in expected.GetProperty("selection_rate").EnumerateObject().Select(g => g.Name))
        {
            Compare(c, snapshot.Number("value", "selection_rate", "group", group), [.. at, "selection_rate", group]);
            if (group != reference)
            {
                Assert.Equal(reference, (string?)snapshot.Reading("impact_ratio", "group", group)["reference"]);
                Compare(c, snapshot.Number("value", "impact_ratio", "group", group), [.. at, "impact_ratio", group]);
            }
        }
    }

    private static double Level(ReferenceCase c) => c.Input.GetProperty("conf").GetDouble();

    private static ReplayedSnapshot TwoGroups(ReferenceCase c) => new TableReplay { Reference = "two", Level = Level(c) }
        .Add("one", c.Count("x1"), c.Count("n1") - c.Count("x1"))
        .Add("two", c.Count("x2"), c.Count("n2") - c.Count("x2"))
        .Run();

    private GroupComparison Pair(ReferenceCase c, ReplayedSnapshot snapshot) =>
        new(Comparison, c, snapshot, "group") { Group = "one", Reference = "two" };
}
