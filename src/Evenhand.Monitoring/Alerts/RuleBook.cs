namespace Evenhand.Monitoring.Alerts;

/// <summary>Every judge there is, in order: limits, shifts, silence, then data quality.</summary>
public static class RuleBook
{
    private static readonly IRuleJudge[] Judges = [new LimitJudge(), new ShiftJudge(), new SilenceJudge(), new DataQualityJudge()];

    /// <summary>Judges every rule and writes the state of declared limits beside the readings they judge.</summary>
    /// <remarks>Where several rules judge one reading, the gravest state stands beside it.</remarks>
    public static IReadOnlyList<Judgement> Judge(RuleContext context)
    {
        ArgumentNullException.ThrowIfNull(context);
        List<Judgement> judgements = [.. Judges.SelectMany(j => j.Judge(context))];
        foreach (IGrouping<Measures.Reading, Judgement> judged in judgements
            .Where(j => j.Reading is not null && j.Declared is not null)
            .GroupBy(j => j.Reading!))
        {
            judged.Key.State = judged.MaxBy(j => Gravity(j.State))!.State.Name();
        }

        return judgements;
    }

    private static int Gravity(JudgementState state) => state switch
    {
        JudgementState.Beyond => 4,
        JudgementState.TooFew => 3,
        JudgementState.WarmingUp => 2,
        JudgementState.Undecided => 1,
        _ => 0,
    };
}
