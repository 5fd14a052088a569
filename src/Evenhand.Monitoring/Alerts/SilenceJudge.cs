using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Alerts;

/// <summary>Judges declared silence: no record used for longer than the rule allows.</summary>
public sealed class SilenceJudge : IRuleJudge
{
    /// <inheritdoc/>
    public IEnumerable<Judgement> Judge(RuleContext context)
    {
        ArgumentNullException.ThrowIfNull(context);
        foreach (AlertRule rule in context.Charter.Alerts.Where(r => r.NoRecordsFor is not null))
        {
            double allowed = rule.NoRecordsFor!.Value.Length.TotalSeconds;
            double? seconds = context.Newest is null ? null : (context.AsOf - context.Newest.Value) / 1e6;
            yield return new Judgement
            {
                Rule = rule.Name,
                Kind = "silence",
                Severity = rule.Severity,
                Declared = rule,
                Value = seconds,
                Above = allowed,
                State = seconds is null || seconds > allowed ? JudgementState.Beyond : JudgementState.Within,
                Note = context.Newest is null
                    ? "no record was used at all"
                    : $"the last record used is of {EventTime.Text(context.Newest.Value)}",
            };
        }
    }
}
