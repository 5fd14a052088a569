using System.Text.Json;
using Evenhand.Testing;
using Xunit.Abstractions;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>The credit dataset: decisions, outcomes and scores, under its two charters.</summary>
public sealed class CreditDataTests(ITestOutputHelper output) : CaseTest(output)
{
    private const string Credits = "german_credit_decoded.csv";

    [Fact]
    public void Standing_ReferenceCases_Agree()
    {
        ReplayedSnapshot byHousing = OpenData.Replay("credit-standing", Credits);
        ReplayedSnapshot byJob = OpenData.Replay("credit-standing", Credits, null, ("{ field: housing,", "{ field: job,"));
        BySex(Case("two_group", "german-sex-good"), byHousing).CompareCrude();
        BySex(Case("stratified", "german-mh-housing"), byHousing).CompareAdjusted();
        BySex(Case("stratified", "german-mh-job"), byJob).CompareAdjusted();
        new GroupComparison(Comparison, Case("two_group", "german-foreign-good"), byHousing, "foreign_worker")
        {
            Group = "0",
            Reference = "1",
        }.CompareCrude();
        AssertAgreement((2 * Crude) + (2 * Adjusted));
    }

    [Fact]
    public void Decision_ReferenceCase_Agrees()
    {
        BySex(Case("two_group", "german-sex-decision"), OpenData.Replay("credit", Credits)).CompareCrude();
        AssertAgreement(Crude);
    }

    [Fact]
    public void Outcomes_BySex_AgreeWithTheConfusionTables()
    {
        ReferenceCase c = Case("classification", "german-confusion-by-sex");
        ReplayedSnapshot snapshot = OpenData.Replay("credit", Credits);
        foreach (string sex in new[] { "male", "female" })
        {
            Compare(c, snapshot.Number("count", "selection_rate", "sex", sex), sex, "n");
            foreach ((string measure, string name) in Rates)
            {
                Compare(c, snapshot.Number("value", measure, "sex", sex), sex, name);
            }
        }

        foreach ((string measure, string name) in Rates)
        {
            Compare(c, snapshot.Number("value", measure + "_gap", "sex", "male"), "gaps_male_minus_female", name);
        }

        Compare(c, snapshot.Number("value", "calibration_gap", "sex", "male"), "gaps_male_minus_female", "calibration_in_the_large");
        AssertAgreement((2 * 6) + 5 + 1);
    }

    /// <summary>
    /// Scores are kept in 2⁴⁰ steps of their range. A range of a power of two holds whole numbers exactly; one of 100,000 would
    /// round an amount by up to 4.5e-8 and the means by 5e-10, where the case allows 1e-10.
    /// </summary>
    [Theory]
    [InlineData("score_by_sex", "score_good", "[0, 1]")]
    [InlineData("age_by_sex", "age", "[0, 150]")]
    [InlineData("amount_by_sex", "amount_dm", "[0, 32768]")]
    public void Means_BySex_Agree(string name, string column, string range)
    {
        ReferenceCase c = Case("smd", "german-smd");
        ReplayedSnapshot snapshot = OpenData.Replay("credit", Credits, null, ("score_good, range: [0, 1]", $"{column}, range: {range}"));
        CompareMeans(c, snapshot, name, "sex", "male", "female");
        AssertAgreement(3);
    }

    [Fact]
    public void Means_ByClass_Agree()
    {
        ReferenceCase c = Case("smd", "german-smd");
        ReplayedSnapshot snapshot = OpenData.Replay(
            "credit",
            Credits,
            null,
            ("score_good, range: [0, 1]", "duration_months, range: [0, 1000]"),
            ("{ name: sex, at: sex, values: [male, female], reference: female }", "{ name: class, at: class, values: [Bad, Good], reference: Good }"));
        CompareMeans(c, snapshot, "duration_by_class", "class", "Bad", "Good");
        AssertAgreement(3);
    }

    [Fact]
    public void Scores_ByTenthAndSex_AgreeWithTheReliabilityTable()
    {
        ReferenceCase c = Case("calibration", "german-calibration-bins");
        ReplayedSnapshot snapshot = OpenData.Replay(
            "credit",
            Credits,
            null,
            ("reference: female }", "reference: female }\n  - { name: tenth, at: score_good, bands: [0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9], reference: \"0.9..\" }\nintersections: [[sex, tenth]]"),
            ("minimum_cell: 10", "minimum_cell: 0"));
        string[] cuts = ["0", "0.1", "0.2", "0.3", "0.4", "0.5", "0.6", "0.7", "0.8", "0.9", ""];
        foreach (string sex in new[] { "male", "female" })
        {
            foreach (JsonElement bin in c.Expected.GetProperty(sex).EnumerateArray())
            {
                int i = bin.GetProperty("bin").GetInt32();
                CompareBin(c, snapshot, bin, $"{sex}+{cuts[i]}..{cuts[i + 1]}");
            }
        }

        AssertAgreement((18 * 3) + 2);
    }

    private static (string Measure, string Name)[] Rates { get; } =
    [
        ("true_positive_rate", "tpr"), ("false_positive_rate", "fpr"), ("precision", "ppv"), ("outcome_rate", "base_rate"), ("mean_score", "mean_score"),
    ];

    private void CompareMeans(ReferenceCase c, ReplayedSnapshot snapshot, string name, string grouping, string group, string reference)
    {
        Compare(c, snapshot.Number("value", "mean_score", grouping, group), name, "mean1");
        Compare(c, snapshot.Number("value", "mean_score", grouping, reference), name, "mean2");
        Compare(c, snapshot.Number("value", "standardized_mean_difference", grouping, group), name, "smd_avgvar");
    }

    private void CompareBin(ReferenceCase c, ReplayedSnapshot snapshot, JsonElement bin, string cell)
    {
        long n = bin.GetProperty("n").GetInt64();
        Comparison.Value(c, $"{cell} n", snapshot.Number("count", "selection_rate", "sex+tenth", cell), n);
        if (n > 0)
        {
            double good = snapshot.Number("value", "outcome_rate", "sex+tenth", cell) * n;
            Comparison.Value(c, $"{cell} good", good, bin.GetProperty("good").GetInt64());
            Comparison.Value(c, $"{cell} mean_score", snapshot.Number("value", "mean_score", "sex+tenth", cell), bin.GetProperty("mean_score").GetDouble());
        }
    }

    private GroupComparison BySex(ReferenceCase c, ReplayedSnapshot snapshot) =>
        new(Comparison, c, snapshot, "sex") { Group = "male", Reference = "female" };
}
