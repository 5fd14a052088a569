namespace Evenhand.Monitoring.Measures;

/// <summary>The published names of measures.</summary>
public static class MeasureNames
{
    /// <summary>Favourable among decided.</summary>
    public const string SelectionRate = "selection_rate";

    /// <summary>Rate of the group less rate of the reference.</summary>
    public const string SelectionRateGap = "selection_rate_gap";

    /// <summary>Rate of the group over rate of the reference.</summary>
    public const string ImpactRatio = "impact_ratio";

    /// <summary>Unfavourable rate of the group over that of the reference.</summary>
    public const string UnfavourableRatio = "unfavourable_ratio";

    /// <summary>Favourable decisions that the group would have had at the reference's rate, less those it had.</summary>
    public const string Shortfall = "shortfall";

    /// <summary>Odds of the group over odds of the reference.</summary>
    public const string OddsRatio = "odds_ratio";

    /// <summary>Pooled two-proportion z.</summary>
    public const string RateZ = "rate_z";

    /// <summary>Mantel–Haenszel odds ratio.</summary>
    public const string AdjustedOddsRatio = "adjusted_odds_ratio";

    /// <summary>Mantel–Haenszel rate difference.</summary>
    public const string AdjustedRateGap = "adjusted_rate_gap";

    /// <summary>Favourable among positive outcomes.</summary>
    public const string TruePositiveRate = "true_positive_rate";

    /// <summary>Favourable among negative outcomes.</summary>
    public const string FalsePositiveRate = "false_positive_rate";

    /// <summary>Positive outcomes among favourable decisions with a known outcome.</summary>
    public const string Precision = "precision";

    /// <summary>Positive outcomes among known outcomes.</summary>
    public const string OutcomeRate = "outcome_rate";

    /// <summary>What the name of a difference of rates ends with.</summary>
    public const string GapSuffix = "_gap";

    /// <summary>Mean score.</summary>
    public const string MeanScore = "mean_score";

    /// <summary>Mean score of the group less that of the reference.</summary>
    public const string MeanScoreGap = "mean_score_gap";

    /// <summary>Difference of means over the root of the mean variance.</summary>
    public const string StandardizedMeanDifference = "standardized_mean_difference";

    /// <summary>Mean score less outcome rate, of the group less that of the reference.</summary>
    public const string CalibrationGap = "calibration_gap";

    /// <summary>Decisions that are neither favourable nor unfavourable.</summary>
    public const string OtherRate = "other_rate";

    /// <summary>Records in which a field is missing.</summary>
    public const string MissingRate = "missing_rate";

    /// <summary>Records in which a field has a value that the charter does not list.</summary>
    public const string UnlistedRate = "unlisted_rate";
}
