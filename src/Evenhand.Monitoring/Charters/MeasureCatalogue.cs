using static Evenhand.Monitoring.Charters.MeasureNeeds;
using static Evenhand.Monitoring.Charters.MeasureScale;

namespace Evenhand.Monitoring.Charters;

/// <summary>Every measure there is; the one place that lists them.</summary>
public static class MeasureCatalogue
{
    private static readonly Dictionary<string, MeasureDefinition> ByName;

    static MeasureCatalogue()
    {
        All = [.. Decisions(), .. Outcomes(), .. Scores(), .. Robustness()];
        ByName = All.ToDictionary(m => m.Name, StringComparer.Ordinal);
    }

    /// <summary>The measures in the order in which tables show them.</summary>
    public static IReadOnlyList<MeasureDefinition> All { get; }

    /// <summary>The measure of a name, or null.</summary>
    public static MeasureDefinition? Find(string name) => ByName.GetValueOrDefault(name);

    private static MeasureDefinition[] Decisions() =>
    [
        new("selection_rate", Rate, None, false, true, true, "favourable decisions as a share of favourable and unfavourable ones"),
        new("selection_rate_gap", RateGap, None, true, true, true, "selection rate of the group less that of the reference"),
        new("impact_ratio", Ratio, None, true, true, false, "selection rate of the group divided by that of the reference"),
        new("unfavourable_ratio", Ratio, None, true, true, false, "unfavourable rate of the group divided by that of the reference"),
        new("shortfall", Number, None, true, false, false, "favourable decisions that the group is short of the reference's rate"),
        new("odds_ratio", Ratio, None, true, false, false, "odds of a favourable decision in the group divided by those in the reference"),
        new("rate_z", Number, None, true, false, false, "pooled two-proportion z of the group's rate against the reference's"),
        new("adjusted_odds_ratio", Ratio, Adjust, true, false, false, "odds ratio pooled over the strata of adjust (Mantel-Haenszel)"),
        new("adjusted_rate_gap", RateGap, Adjust, true, false, true, "rate gap pooled over the strata of adjust (Mantel-Haenszel)"),
        new("other_rate", Rate, None, false, true, true, "decisions listed under other as a share of all decisions"),
        new("missing_rate", Rate, Field, false, true, true, "share of records in which the field is missing"),
        new("unlisted_rate", Rate, Field, false, true, true, "share of records in which the field holds a value that the charter does not list"),
    ];

    private static MeasureDefinition[] Outcomes() =>
    [
        OutcomeRate("true_positive_rate", "favourable decisions as a share of cases with a positive outcome"),
        OutcomeGap("true_positive_rate_gap", "true positive rate of the group less that of the reference"),
        OutcomeRate("false_positive_rate", "favourable decisions as a share of cases with a negative outcome"),
        OutcomeGap("false_positive_rate_gap", "false positive rate of the group less that of the reference"),
        OutcomeRate("precision", "positive outcomes as a share of favourable decisions"),
        OutcomeGap("precision_gap", "precision of the group less that of the reference"),
        OutcomeRate("outcome_rate", "positive outcomes as a share of known outcomes"),
        OutcomeGap("outcome_rate_gap", "outcome rate of the group less that of the reference"),
    ];

    private static MeasureDefinition[] Scores() =>
    [
        new("mean_score", Number, Score, false, false, false, "mean score of the group"),
        new("mean_score_gap", Number, Score, true, false, false, "mean score of the group less that of the reference"),
        new("standardized_mean_difference", Number, Score, true, false, false, "mean score gap in units of the root mean square of the two standard deviations"),
        new("calibration_gap", Number, Score | Outcome, true, false, false, "mean score less outcome rate, of the group less the same of the reference"),
    ];

    private static MeasureDefinition[] Robustness() =>
    [
        Flip("flip_risk", "mean probability that the decision would be the other one, were its missing fields known"),
        Flip("flip_to_favourable", "mean probability that an unfavourable decision would be favourable, were its missing fields known"),
        Flip("flip_to_unfavourable", "mean probability that a favourable decision would be unfavourable, were its missing fields known"),
        new("flip_risk_gap", RateGap, Circuit, true, true, false, "flip risk of the group less that of the reference"),
        Flip("robust_share", "share of decisions whose flip risk is at most 0.05"),
        Flip("unflippable_share", "share of decisions that no completion of their missing fields could flip"),
        new("feed_loss_risk", Rate, Circuit | Field, false, true, false, "mean probability that a decision would flip if the field alone were missing"),
    ];

    private static MeasureDefinition OutcomeRate(string name, string meaning) => new(name, Rate, Outcome, false, true, true, meaning);

    private static MeasureDefinition OutcomeGap(string name, string meaning) => new(name, RateGap, Outcome, true, true, true, meaning);

    private static MeasureDefinition Flip(string name, string meaning) => new(name, Rate, Circuit, false, true, false, meaning);
}
