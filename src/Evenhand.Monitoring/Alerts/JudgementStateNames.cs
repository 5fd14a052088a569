namespace Evenhand.Monitoring.Alerts;

/// <summary>The published texts of <see cref="JudgementState"/>.</summary>
public static class JudgementStateNames
{
    /// <summary>The published text of a state.</summary>
    public static string Name(this JudgementState state) => state switch
    {
        JudgementState.Within => "within",
        JudgementState.Undecided => "undecided",
        JudgementState.Beyond => "beyond",
        JudgementState.TooFew => "too_few",
        JudgementState.WarmingUp => "warming_up",
        _ => throw new ArgumentOutOfRangeException(nameof(state), state, "not a state"),
    };
}
