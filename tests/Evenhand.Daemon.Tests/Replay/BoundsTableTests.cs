using System.Text.Json;
using Evenhand.Testing;
using Xunit.Abstractions;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>What holds whatever the missing labels or outcomes are, from published and made-up tables expanded to rows.</summary>
public sealed class BoundsTableTests(ITestOutputHelper output) : CaseTest(output)
{
    [Theory]
    [InlineData("bounds", "bounds-missing-label-toy", "observed_diff")]
    [InlineData("bounds", "bounds-missing-label-no-known-B", "observed_diff")]
    [InlineData("em", "em-missing-group-label", "complete_case_diff", "worst_case")]
    public void MissingLabels_ReferenceCase_Agrees(string topic, string id, string observed, params string[] at)
    {
        ReferenceCase c = Case(topic, id);
        TableReplay table = new() { Reference = "B" };
        foreach ((string? group, string name) in new[] { ("A", "groupA"), ("B", "groupB"), (null, "unlabelled") })
        {
            JsonElement counts = c.Input.GetProperty(name);
            table.Add(group, counts.GetProperty("selected").GetInt64(), counts.GetProperty("not_selected").GetInt64());
        }

        ReplayedSnapshot snapshot = table.Run();
        Compare(c, snapshot.Number("value", "selection_rate_gap", "group", "A"), observed);
        CompareBounds(c, snapshot, "selection_rate_gap", "A", [.. at, "diff"]);
        CompareBounds(c, snapshot, "impact_ratio", "A", [.. at, "ratio"]);
        CompareBounds(c, snapshot, "selection_rate", "A", [.. at, "rateA"]);
        CompareBounds(c, snapshot, "selection_rate", "B", [.. at, "rateB"]);
        AssertAgreement(1 + (4 * 2));
    }

    /// <summary>
    /// The rate among those found, and how many were found. The case's bounds are over missing outcomes of every kind of decision,
    /// for which there is no reading: bounds are given for missing labels, and for outcomes seen after favourable decisions only.
    /// </summary>
    [Fact]
    public void MissingOutcomes_HomelessMen_RatesAgree()
    {
        ReferenceCase c = Case("bounds", "manski-homeless-men");
        long sampled = c.Count("sampled"), observed = c.Count("observed"), ones = c.Count("ones_among_observed");
        using WorkFolder folder = new();
        string charter = folder.Write("outcomes.yaml", """
            charter: outcomes
            decision: { at: decision, favourable: ["yes"], unfavourable: ["no"] }
            groups: [{ name: sampled, at: sampled, values: ["1", "2"] }]
            outcome: { at: outcome, positive: ["1"], negative: ["0"] }
            """);
        IEnumerable<string> rows = Enumerable.Range(0, (int)sampled).Select(i => i < ones ? "1,yes,1" : i < observed ? "1,yes,0" : "1,yes,");
        ReplayedSnapshot snapshot = InProcessReplay.Run(charter, folder.Write("men.csv", "sampled,decision,outcome\n" + string.Join('\n', rows)));
        double found = snapshot.Number("count", "outcome_rate", null, null);
        double all = snapshot.Number("count", "selection_rate", null, null);
        Compare(c, snapshot.Number("value", "outcome_rate", null, null), "observed_rate");
        Compare(c, found / all, "response_rate");
        AssertAgreement(2);
    }

    private void CompareBounds(ReferenceCase c, ReplayedSnapshot snapshot, string measure, string group, string[] path) => CompareEnds(
        c,
        snapshot.Number("low", measure, "group", group, "bounds"),
        snapshot.Number("high", measure, "group", group, "bounds"),
        path);
}
