using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Measures;
using Evenhand.Monitoring.Windows;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Monitoring.Alerts;

/// <summary>Rules on the data itself that need no declaration; only those that are broken are reported.</summary>
/// <remarks>
/// The limits are this program's choice (common practice, no source): a twentieth of the records rejected, a tenth more of a
/// field missing or unlisted than in the baseline. The interval must be wholly beyond them.
/// </remarks>
public sealed class DataQualityJudge : IRuleJudge
{
    /// <summary>Share of rejected records above which the rule <c>rejected-share</c> opens.</summary>
    public const double RejectedShare = 0.05;

    /// <summary>Rise of a missing or unlisted rate above which the rules <c>missing-jump</c> and <c>unlisted-jump</c> open.</summary>
    public const double AbsenceJump = 0.10;

    private const string VersionSlice = "version";

    /// <inheritdoc/>
    public IEnumerable<Judgement> Judge(RuleContext context)
    {
        ArgumentNullException.ThrowIfNull(context);
        return Rejected(context).Concat(NothingUsed(context)).Concat(Jumps(context)).Concat(UnknownVersions(context));
    }

    private static IEnumerable<Judgement> Rejected(RuleContext context)
    {
        ShardCounts counts = context.Counts;
        if (counts.Read < context.Charter.MinimumCount)
        {
            yield break;
        }

        Interval share = WilsonInterval.Of(counts.Rejected, counts.Read, context.Charter.Level);
        if (share.Low > RejectedShare)
        {
            yield return Broken("rejected-share", AlertSeverity.Page, $"{counts.Rejected:N0} of {counts.Read:N0} records rejected") with
            {
                Value = (double)counts.Rejected / counts.Read,
                Low = share.Low,
                High = share.High,
                Above = RejectedShare,
            };
        }
    }

    private static IEnumerable<Judgement> NothingUsed(RuleContext context)
    {
        if (context.Counts.Used == 0)
        {
            yield return Broken("no-used-records", AlertSeverity.Page, "no record was used: readings have nothing to rest on");
            yield break;
        }

        if (context.Charter.Time is not null && context.Windows.FirstOrDefault(w => w.Window != RuleReadings.All) is { } first
            && first.Counts(first.Layout.Groupings[0], 0).Decided == 0)
        {
            yield return Broken("no-used-records", AlertSeverity.Page, $"no record was used within {first.Window}");
        }
    }

    private static IEnumerable<Judgement> Jumps(RuleContext context)
    {
        WindowSums? now = context.Windows.FirstOrDefault(w => w.Window != RuleReadings.All);
        WindowSums? before = now is null ? null : context.BaselineOf(now.Window);
        if (now is null || before is null)
        {
            yield break;
        }

        foreach (Reading reading in context.Readings.Where(r => r.Window == now.Window && r.Slice is null && IsAbsence(r)))
        {
            GroupingShape shape = now.Layout.Groupings.First(g => g.Name == reading.Grouping);
            if (shape.Groups.Count <= 1 && Jump(context, now, before, shape, reading) is { } judgement)
            {
                yield return judgement;
            }
        }
    }

    private static bool IsAbsence(Reading reading) => reading.Measure is MeasureNames.MissingRate or MeasureNames.UnlistedRate;

    private static Judgement? Jump(RuleContext context, WindowSums now, WindowSums before, GroupingShape shape, Reading reading)
    {
        int cell = Enumerable.Range(0, shape.Cells).First(c => shape.Name is null || shape.Label(c) == reading.Group);
        int field = now.Layout.AbsenceFields.ToList().IndexOf(reading.Field!);
        bool isMissing = reading.Measure == MeasureNames.MissingRate;
        long n = now.Counts(shape, cell).Decided, nBefore = before.Counts(shape, cell).Decided;
        if (Math.Min(n, nBefore) < context.Charter.MinimumCount)
        {
            return null;
        }

        long x = now.Absent(shape, cell, field, isMissing ? 0 : 1), xBefore = before.Absent(shape, cell, field, isMissing ? 0 : 1);
        Interval rise = NewcombeDifference.Of(x, n, xBefore, nBefore, context.Charter.Level);
        return rise.Low <= AbsenceJump ? null : Broken(
            isMissing ? "missing-jump" : "unlisted-jump",
            AlertSeverity.Ticket,
            $"{reading.Field} is {(isMissing ? "missing" : "unlisted")} more often than before") with
        {
            Reading = reading,
            Value = ((double)x / n) - ((double)xBefore / nBefore),
            Low = rise.Low,
            High = rise.High,
            Above = AbsenceJump,
        };
    }

    private static IEnumerable<Judgement> UnknownVersions(RuleContext context)
    {
        HashSet<string> known = [.. context.Charter.Rules.Where(r => r.Version is not null).Select(r => $"{VersionSlice}={r.Version}")];
        bool isListed = context.Charter.Slices.Any(s => s.Name == VersionSlice && s.Values is not null);
        string window = context.Windows.Count == 0 ? RuleReadings.All : context.Windows[0].Window;
        foreach (WindowSums slice in context.Slices.Where(s => s.Window == window && s.Slice!.StartsWith($"{VersionSlice}=", StringComparison.Ordinal)))
        {
            bool isUnknown = known.Count > 0
                ? !known.Contains(slice.Slice!)
                : isListed && slice.Slice == $"{VersionSlice}={SliceField.OtherValue}";
            long decided = slice.Counts(slice.Layout.Groupings[0], 0).Decided;
            if (isUnknown && decided > 0)
            {
                yield return Broken("unknown-version", AlertSeverity.Ticket, $"{decided:N0} records of {slice.Slice}, which the charter does not know") with
                {
                    Value = decided,
                };
            }
        }
    }

    private static Judgement Broken(string rule, AlertSeverity severity, string note) => new()
    {
        Rule = rule,
        Kind = "data_quality",
        Severity = severity,
        State = JudgementState.Beyond,
        Note = note,
    };
}
