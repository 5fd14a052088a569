namespace Evenhand.Monitoring.Alerts;

/// <summary>What a rule says of a reading.</summary>
public enum JudgementState
{
    /// <summary>The whole interval is within the limit.</summary>
    Within = 0,

    /// <summary>The interval holds the limit.</summary>
    Undecided = 1,

    /// <summary>The whole interval is beyond the limit.</summary>
    Beyond = 2,

    /// <summary>Too few records on one side to judge.</summary>
    TooFew = 3,

    /// <summary>What the rule rests on is not there yet.</summary>
    WarmingUp = 4,
}
