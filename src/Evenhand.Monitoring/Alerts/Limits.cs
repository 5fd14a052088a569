namespace Evenhand.Monitoring.Alerts;

/// <summary>A lower and an upper limit, and what an interval says of them.</summary>
/// <param name="Below">Beyond when wholly below; null for none.</param>
/// <param name="Above">Beyond when wholly above; null for none.</param>
public readonly record struct Limits(double? Below, double? Above)
{
    /// <summary>Judges an interval: beyond only when it lies wholly on the far side, within only when wholly on the near one.</summary>
    /// <param name="low">The lower end; NaN decides nothing.</param>
    /// <param name="high">The upper end; NaN decides nothing.</param>
    public JudgementState Judge(double low, double high)
    {
        if (high < Below || low > Above)
        {
            return JudgementState.Beyond;
        }

        bool isWithin = (Below is null || low >= Below) && (Above is null || high <= Above);
        return isWithin ? JudgementState.Within : JudgementState.Undecided;
    }
}
