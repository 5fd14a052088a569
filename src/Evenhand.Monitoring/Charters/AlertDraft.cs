namespace Evenhand.Monitoring.Charters;

/// <summary>An alert rule with its limits as written.</summary>
internal sealed record AlertDraft(AlertRule Rule, LimitValue? Below, LimitValue? Above, LimitValue? Shift);
