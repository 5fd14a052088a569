using System.Globalization;
using System.Text;
using System.Text.Json;
using Evenhand.Testing;
using Xunit.Abstractions;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>The example tables of 6 RCNY 5-301, each expanded to one row an applicant.</summary>
public sealed class ImpactRatioRuleTests(ITestOutputHelper output) : CaseTest(output)
{
    [Theory]
    [InlineData("selection", "selected", "selection_rate")]
    [InlineData("scoring", "above_median", "scoring_rate")]
    public void SexTable_ReferenceCase_Agrees(string kind, string column, string rates)
    {
        ReferenceCase c = Case("impact_ratio", $"ll144-{kind}-sex");
        ReplayedSnapshot snapshot = Replay(kind, column, "sex");
        CompareTable(c, snapshot, "sex", rates);
        AssertAgreement(2 + 1);
    }

    /// <summary>Two groups of the scoring table share the highest rate; the charter names one, against which the other's ratio is 1.</summary>
    [Theory]
    [InlineData("selection", "selected", "selection_rate")]
    [InlineData("scoring", "above_median", "scoring_rate")]
    public void IntersectionalTable_ReferenceCase_Agrees(string kind, string column, string rates)
    {
        ReferenceCase c = Case("impact_ratio", $"ll144-{kind}-intersectional");
        ReplayedSnapshot snapshot = Replay(kind, column, "intersectional");
        CompareTable(c, snapshot, "sex+race", rates);
        AssertAgreement(14 + 13);
    }

    [Fact]
    public void Shares_TwoPercentCase_Agrees()
    {
        ReferenceCase c = Case("impact_ratio", "ll144-two-percent-exclusion");
        ReplayedSnapshot byRace = Replay("selection", "selected", "race");
        ReplayedSnapshot both = Replay("selection", "selected", "intersectional");
        Comparison.Number(c, "race_total", byRace.Records("used"));
        Comparison.Number(c, "intersectional_total", both.Records("used"));
        List<string> below = [];
        foreach (string race in c.Input.GetProperty("race_applicants").EnumerateObject().Select(r => r.Name))
        {
            double share = byRace.Number("count", "selection_rate", "race", race) / byRace.Records("used");
            Compare(c, share, "race_share", race);
            if (share < 0.02)
            {
                below.Add(race);
            }
        }

        Assert.Equal(Texts(c, "race_excludable"), below);
        Assert.Equal(Texts(c, "intersectional_excludable"), c.Input.GetProperty("intersectional_applicants").EnumerateObject()
            .Select(g => g.Name)
            .Where(g => both.Number("count", "selection_rate", "sex+race", Joined(g)) / both.Records("used") < 0.02));
        AssertAgreement(2 + 7);
    }

    private static IEnumerable<string> Texts(ReferenceCase c, string name) =>
        c.Expected.GetProperty(name).EnumerateArray().Select(t => t.GetString()!);

    private static string Joined(string category) => category.Replace('|', '+');

    private static ReplayedSnapshot Replay(string kind, string column, string table)
    {
        StringBuilder rows = new($"sex,race,{column}\n");
        foreach (string[] cells in File.ReadLines(TestData.Path($"ll144_{kind}_example.csv")).Select(l => l.Split(',')).Where(l => l[0] == table))
        {
            string people = table switch { "sex" => cells[1] + ",", "race" => "," + cells[1], _ => cells[1].Replace('|', ',') };
            int all = int.Parse(cells[2], CultureInfo.InvariantCulture), chosen = int.Parse(cells[3], CultureInfo.InvariantCulture);
            for (int i = 0; i < all; i++)
            {
                rows.Append(people).Append(',').Append(i < chosen ? "yes" : "no").Append('\n');
            }
        }

        return OpenData.ReplayRows($"impact-ratio-{kind}", rows.ToString());
    }

    private void CompareTable(ReferenceCase c, ReplayedSnapshot snapshot, string grouping, string rates)
    {
        List<string> references = [.. Texts(c, "reference_group")];
        foreach (JsonProperty expected in c.Expected.GetProperty("impact_ratio").EnumerateObject())
        {
            string group = Joined(expected.Name);
            double rate = snapshot.Number("value", "selection_rate", grouping, group);
            if (c.TryExpected(rates, out _))
            {
                Compare(c, rate, rates, expected.Name);
            }

            if (expected.Name != references[0])
            {
                Assert.Equal(Joined(references[0]), (string?)snapshot.Reading("impact_ratio", grouping, group)["reference"]);
                Compare(c, snapshot.Number("value", "impact_ratio", grouping, group), "impact_ratio", expected.Name);
            }
        }
    }
}
