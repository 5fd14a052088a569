using System.Text;
using System.Text.Json;
using Evenhand.Testing;
using Xunit.Abstractions;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>The open datasets, replayed under the charters of tests/data/charters/open.</summary>
public sealed class OpenDataTests(ITestOutputHelper output) : CaseTest(output)
{
    private const string Mortgages = "hmda_boston_1990.csv";
    private const string Arrests = "toronto_arrests_release.csv";
    private const string Stops = "minneapolis_stops_2017.csv";

    [Fact]
    public void Mortgage_ReferenceCases_Agree()
    {
        ReplayedSnapshot byHistory = OpenData.Replay("mortgage", Mortgages);
        ReplayedSnapshot byHousehold = OpenData.Replay("mortgage", Mortgages, null, ("{ field: mhist,", "{ field: single,"));
        Denials(Case("two_group", "hmda-denial-crude"), byHistory).CompareCrude();
        Denials(Case("stratified", "hmda-mh-mortgage-history"), byHistory).CompareAdjusted();
        Denials(Case("stratified", "hmda-mh-single"), byHousehold).CompareAdjusted();

        ReferenceCase ratio = Case("impact_ratio", "hmda-approval-impact-ratio");
        Compare(ratio, byHistory.Number("value", "selection_rate", "afam", "yes"), "selection_rate", "black");
        Compare(ratio, byHistory.Number("value", "selection_rate", "afam", "no"), "selection_rate", "other");
        Compare(ratio, byHistory.Number("value", "impact_ratio", "afam", "yes"), "impact_ratio", "black");
        AssertAgreement(Crude + (2 * Adjusted) + 3);
    }

    [Theory]
    [InlineData("resume-all", null)]
    [InlineData("resume-boston", "city=boston")]
    [InlineData("resume-female", "gender=female")]
    [InlineData("resume-high", "quality=high")]
    [InlineData("resume-low", "quality=low")]
    public void CallBacks_ReferenceCase_Agrees(string id, string? only)
    {
        ReplayedSnapshot snapshot = OpenData.Replay("call-backs", "resume_callbacks_2001_2002.csv", only);
        new GroupComparison(Comparison, Case("two_group", id), snapshot, "ethnicity")
        {
            Group = "afam",
            Reference = "cauc",
            Group1IsReference = true,
        }.CompareCrude();
        AssertAgreement(Crude);
    }

    [Fact]
    public void Arrests_ReferenceCases_Agree()
    {
        ReplayedSnapshot byChecks = OpenData.Replay("arrests", Arrests);
        ReplayedSnapshot byYear = OpenData.Replay("arrests", Arrests, null, ("{ field: checks,", "{ field: year,"));
        Releases(Case("stratified", "arrests-mh-checks"), byChecks).CompareAdjusted();
        Releases(Case("stratified", "arrests-mh-year"), byYear).CompareAdjusted();

        ReferenceCase ratio = Case("impact_ratio", "arrests-impact-ratio");
        Compare(ratio, byChecks.Number("value", "selection_rate", "colour", "White"), "selection_rate", "White");
        Compare(ratio, byChecks.Number("value", "selection_rate", "colour", "Black"), "selection_rate", "Black");
        Compare(ratio, byChecks.Number("value", "impact_ratio", "colour", "Black"), "impact_ratio", "Black");
        AssertAgreement((2 * Adjusted) + 3);
    }

    [Fact]
    public void Stops_ReferenceCases_Agree()
    {
        ReplayedSnapshot snapshot = OpenData.Replay("stops", Stops);
        Searches(Case("two_group", "minneapolis-crude"), snapshot).CompareCrude();
        Searches(Case("stratified", "minneapolis-mh-problem-precinct"), snapshot).CompareAdjusted();
        CompareMissingness(snapshot);
        AssertAgreement(Crude + Adjusted + 2 + (2 * 8));
    }

    [Fact]
    public void Stops_SuspiciousOnly_BoundsAgree()
    {
        ReferenceCase c = Case("bounds", "bounds-minneapolis-suspicious");
        ReplayedSnapshot snapshot = OpenData.Replay("stops", Stops, "problem=suspicious");
        Compare(c, 1 - snapshot.Number("value", "selection_rate", "race", "Black"), "rate_black");
        Compare(c, 1 - snapshot.Number("value", "selection_rate", "race", "White"), "rate_white");
        Compare(c, -snapshot.Number("value", "selection_rate_gap", "race", "Black"), "diff_observed");
        Compare(c, snapshot.Number("value", "unfavourable_ratio", "race", "Black"), "ratio_observed");
        Ends gap = Bounds(snapshot, "selection_rate_gap");
        CompareEnds(c, -gap.High, -gap.Low, "diff_bounds");
        Ends ratio = Bounds(snapshot, "unfavourable_ratio");
        CompareEnds(c, ratio.Low, ratio.High, "ratio_bounds");
        AssertAgreement(8);
    }

    [Fact]
    public void Admissions_ReferenceCases_Agree()
    {
        ReplayedSnapshot snapshot = OpenData.ReplayRows("admissions", Applicants());
        foreach ((string topic, string id) in new[] { ("two_group", "pair-two-ucb-crude"), ("stratified", "ucb-mh-male-vs-female") })
        {
            GroupComparison comparison = new(Comparison, Case(topic, id), snapshot, "gender") { Group = "Male", Reference = "Female" };
            if (topic == "two_group")
            {
                comparison.CompareCrude();
            }
            else
            {
                comparison.CompareAdjusted();
            }
        }

        AssertAgreement(14 + Adjusted);
    }

    private static string Applicants()
    {
        StringBuilder rows = new("dept,gender,admit\n");
        foreach (string line in File.ReadLines(TestData.Path("ucb_admissions_1973_counts.csv")).Skip(1))
        {
            string[] cells = line.Replace("\"", "", StringComparison.Ordinal).Split(',');
            for (int i = 0; i < int.Parse(cells[3], System.Globalization.CultureInfo.InvariantCulture); i++)
            {
                rows.Append(cells[0]).Append(',').Append(cells[1]).Append(',').Append(cells[2]).Append('\n');
            }
        }

        return rows.ToString();
    }

    private void CompareMissingness(ReplayedSnapshot snapshot)
    {
        ReferenceCase c = Case("bounds", "minneapolis-missingness");
        Compare(c, snapshot.Records("read"), "n");
        Compare(c, snapshot.Rejected("missing_decision"), "missing_race_and_search");
        double unknown = snapshot.Records("used");
        double searched = snapshot.Number("count", "selection_rate", null, null) - snapshot.Number("favourable", "selection_rate", null, null);
        foreach (JsonProperty race in c.Expected.GetProperty("race_counts").EnumerateObject().Where(r => r.Name != "Unknown"))
        {
            double count = snapshot.Number("count", "selection_rate", "race", race.Name);
            double hits = count - snapshot.Number("favourable", "selection_rate", "race", race.Name);
            Compare(c, count, "race_counts", race.Name);
            Compare(c, hits, "searched_by_race", race.Name);
            unknown -= count;
            searched -= hits;
        }

        Compare(c, unknown, "race_counts", "Unknown");
        Compare(c, searched, "searched_by_race", "Unknown");
    }

    private static Ends Bounds(ReplayedSnapshot snapshot, string measure) => new(
        snapshot.Number("low", measure, "race", "Black", "bounds"),
        snapshot.Number("high", measure, "race", "Black", "bounds"));

    private GroupComparison Denials(ReferenceCase c, ReplayedSnapshot snapshot) =>
        new(Comparison, c, snapshot, "afam") { Group = "yes", Reference = "no", EventIsUnfavourable = true };

    private GroupComparison Releases(ReferenceCase c, ReplayedSnapshot snapshot) =>
        new(Comparison, c, snapshot, "colour") { Group = "Black", Reference = "White", Group1IsReference = true };

    private GroupComparison Searches(ReferenceCase c, ReplayedSnapshot snapshot) =>
        new(Comparison, c, snapshot, "race") { Group = "Black", Reference = "White", EventIsUnfavourable = true };

    private readonly record struct Ends(double Low, double High);
}
