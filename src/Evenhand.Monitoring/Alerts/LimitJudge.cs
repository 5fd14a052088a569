using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Measures;

namespace Evenhand.Monitoring.Alerts;

/// <summary>Judges declared limits at a fixed time: beyond when the window's interval lies wholly beyond the limit and the counts are enough.</summary>
public sealed class LimitJudge : IRuleJudge
{
    /// <inheritdoc/>
    public IEnumerable<Judgement> Judge(RuleContext context)
    {
        ArgumentNullException.ThrowIfNull(context);
        foreach (AlertRule rule in context.Charter.Alerts.Where(r => r.Below is not null || r.Above is not null))
        {
            IReadOnlyList<Reading> readings = RuleReadings.Of(rule, context);
            foreach (Reading reading in readings)
            {
                yield return Judge(rule, reading, context.Charter.MinimumCount);
            }

            if (readings.Count == 0)
            {
                yield return new Judgement
                {
                    Rule = rule.Name,
                    Kind = "limit",
                    Severity = rule.Severity,
                    Declared = rule,
                    State = JudgementState.WarmingUp,
                    Note = $"no {rule.Basis ?? ""} reading of {rule.Measure} yet".Replace("  ", " ", StringComparison.Ordinal),
                };
            }
        }
    }

    private static Judgement Judge(AlertRule rule, Reading reading, int minimum)
    {
        double low = reading.JudgedLow ?? reading.Low ?? reading.Value ?? double.NaN;
        double high = reading.JudgedHigh ?? reading.High ?? reading.Value ?? double.NaN;
        bool isEnough = Math.Min(reading.SmallestCount, reading.Count ?? long.MaxValue) >= minimum;
        return new Judgement
        {
            Rule = rule.Name,
            Kind = "limit",
            Severity = rule.Severity,
            Declared = rule,
            Reading = reading,
            Value = reading.Value,
            Low = low,
            High = high,
            Below = rule.Below,
            Above = rule.Above,
            State = isEnough ? new Limits(rule.Below, rule.Above).Judge(low, high) : JudgementState.TooFew,
        };
    }
}
