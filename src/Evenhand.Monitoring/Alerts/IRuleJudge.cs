namespace Evenhand.Monitoring.Alerts;

/// <summary>Judges rules of one sort at a tick. A sequential judge that keeps state between ticks takes the place of a fixed-time one.</summary>
public interface IRuleJudge
{
    /// <summary>The judgements of the tick, in charter order.</summary>
    IEnumerable<Judgement> Judge(RuleContext context);
}
