using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Measures;
using Evenhand.Monitoring.Windows;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Monitoring.Alerts;

/// <summary>Judges declared shifts at a fixed time: the window's reading less the baseline's, both with their intervals.</summary>
/// <remarks>The interval of the difference is MOVER's for independent estimates (G. Y. Zou and A. Donner, Statistics in Medicine 27 (2008) 1693–1702).</remarks>
public sealed class ShiftJudge : IRuleJudge
{
    /// <inheritdoc/>
    public IEnumerable<Judgement> Judge(RuleContext context)
    {
        ArgumentNullException.ThrowIfNull(context);
        Dictionary<string, IReadOnlyList<Reading>> baselines = [];
        foreach (AlertRule rule in context.Charter.Alerts.Where(r => r.Shift is not null))
        {
            string window = RuleReadings.WindowOf(rule, context.Charter);
            if (!baselines.TryGetValue(window, out IReadOnlyList<Reading>? baseline))
            {
                WindowSums? sums = context.BaselineOf(window);
                baseline = sums is null ? [] : MeasureEngine.Measure(sums);
                baselines[window] = baseline;
            }

            foreach (Reading reading in RuleReadings.Of(rule, context))
            {
                yield return Judge(rule, reading, baseline.FirstOrDefault(b => IsSame(b, reading)), context.Charter.MinimumCount);
            }
        }
    }

    private static bool IsSame(Reading a, Reading b) =>
        a.Measure == b.Measure && a.Basis == b.Basis && a.Grouping == b.Grouping && a.Group == b.Group && a.Field == b.Field && a.Reference == b.Reference;

    private static Judgement Judge(AlertRule rule, Reading now, Reading? before, int minimum)
    {
        Judgement judgement = new()
        {
            Rule = rule.Name,
            Kind = "shift",
            Severity = rule.Severity,
            Declared = rule,
            Reading = now,
            Before = before,
            Below = -rule.Shift,
            Above = rule.Shift,
            State = JudgementState.TooFew,
            Note = "not enough records before the window to compare with",
        };
        if (before is null || before.SmallestCount < minimum || now.SmallestCount < minimum)
        {
            return judgement;
        }

        double value = (now.Value ?? double.NaN) - (before.Value ?? double.NaN);
        Interval shift = Mover.Difference(
            now.Value ?? double.NaN,
            new Interval(now.Low ?? double.NaN, now.High ?? double.NaN),
            before.Value ?? double.NaN,
            new Interval(before.Low ?? double.NaN, before.High ?? double.NaN));
        return judgement with
        {
            Value = value,
            Low = shift.Low,
            High = shift.High,
            State = new Limits(-rule.Shift, rule.Shift).Judge(shift.Low, shift.High),
            Note = null,
        };
    }
}
