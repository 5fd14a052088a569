using System.Text.Json;
using Evenhand.Testing;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>
/// Compares a snapshot's readings of one group and its reference with a case of two groups. A case counts an event, which may be
/// our unfavourable decision, in its group 1 against its group 2, of which either may be our reference: gaps then change sign,
/// ratios and odds ratios turn over, and the ends of intervals change places.
/// </summary>
internal sealed class GroupComparison(CaseComparison comparison, ReferenceCase @case, ReplayedSnapshot snapshot, string grouping)
{
    /// <summary>Our group that is compared.</summary>
    public required string Group { get; init; }

    /// <summary>Our reference.</summary>
    public required string Reference { get; init; }

    /// <summary>Whether the case's event is our unfavourable decision.</summary>
    public bool EventIsUnfavourable { get; init; }

    /// <summary>Whether the case's group 1 is our reference.</summary>
    public bool Group1IsReference { get; init; }

    /// <summary>Compares counts, rates, gaps, ratios and tests under each name that cases use.</summary>
    public void CompareCrude()
    {
        Rate("rate1", "wilson1", "x1", "n1", Group1IsReference ? Reference : Group);
        Rate("rate2", "wilson2", "x2", "n2", Group1IsReference ? Group : Reference);
        Numbers gap = Signed(Of("selection_rate_gap"), EventIsUnfavourable ^ Group1IsReference);
        Add(["diff"], gap.Value);
        Ends(["newcombe", "newcombe_diff"], gap);
        Numbers ratio = Turned(Of(EventIsUnfavourable ? "unfavourable_ratio" : "impact_ratio"), Group1IsReference);
        Add(["ratio"], ratio.Value);
        Ends(["katz", "katz_ratio"], ratio);
        Numbers odds = Turned(Of("odds_ratio"), EventIsUnfavourable ^ Group1IsReference);
        Add(["odds_ratio"], odds.Value);
        Ends(["woolf", "woolf_or"], odds);
        Add(["z_pooled", "z_exam"], Signed(Of("rate_z"), EventIsUnfavourable ^ Group1IsReference).Value);
        Tail(["p_pooled", "p_two_sided"], "rate_z");
        Tail(["fisher_p", "fisher_two_sided_p", "fisher_two_sided_p_exam"], "odds_ratio");
        if (@case.TryExpected("fisher", out JsonElement fisher))
        {
            Value("fisher.two_sided", PValue("odds_ratio"), fisher.GetProperty("two_sided").GetDouble());
        }
    }

    /// <summary>Compares what is adjusted for strata, and the crude odds ratio and rates that stratified cases carry.</summary>
    public void CompareAdjusted()
    {
        Numbers odds = Turned(Of("adjusted_odds_ratio"), EventIsUnfavourable ^ Group1IsReference);
        Add(["or_mh", "or"], odds.Value);
        Ends(["ci_rbg", "ci"], odds);
        Numbers gap = Signed(Of("adjusted_rate_gap"), EventIsUnfavourable ^ Group1IsReference);
        Add(["rd_mh"], gap.Value);
        Ends(["rd_ci_sato"], gap);
        comparison.Tail(@case, "breslow_day_p", snapshot.Number("homogeneity_p", "adjusted_odds_ratio", grouping, Group));
        Add(["crude_or"], Turned(Of("odds_ratio"), EventIsUnfavourable ^ Group1IsReference).Value);
        Rate("crude_rate1", "", "", "", Group1IsReference ? Reference : Group);
        Rate("crude_rate2", "", "", "", Group1IsReference ? Group : Reference);
    }

    private void Rate(string rate, string wilson, string events, string count, string group)
    {
        Numbers numbers = Read("selection_rate", group);
        double n = snapshot.Number("count", "selection_rate", grouping, group);
        double favourable = snapshot.Number("favourable", "selection_rate", grouping, group);
        Add([rate], EventIsUnfavourable ? 1 - numbers.Value : numbers.Value);
        Add([events], EventIsUnfavourable ? n - favourable : favourable);
        Add([count], n);
        Ends([wilson], EventIsUnfavourable ? new Numbers(0, 1 - numbers.High, 1 - numbers.Low) : numbers);
    }

    private Numbers Of(string measure) => Read(measure, Group);

    private Numbers Read(string measure, string group) => new(
        snapshot.Number("value", measure, grouping, group),
        snapshot.Number("low", measure, grouping, group),
        snapshot.Number("high", measure, grouping, group));

    private double PValue(string measure) => snapshot.Number("p_value", measure, grouping, Group);

    private static Numbers Signed(Numbers n, bool isNegated) => isNegated ? new(-n.Value, -n.High, -n.Low) : n;

    private static Numbers Turned(Numbers n, bool isTurned) => isTurned ? new(1 / n.Value, 1 / n.High, 1 / n.Low) : n;

    private void Add(string[] names, double got)
    {
        foreach (string name in names)
        {
            comparison.Number(@case, name, got);
        }
    }

    private void Ends(string[] names, Numbers got)
    {
        foreach (string name in names)
        {
            comparison.Ends(@case, name, got.Low, got.High);
        }
    }

    private void Tail(string[] names, string measure)
    {
        foreach (string name in names)
        {
            comparison.Tail(@case, name, PValue(measure));
        }
    }

    private void Value(string name, double got, double expected) => comparison.Value(@case, name, got, expected);

    private readonly record struct Numbers(double Value, double Low, double High);
}
