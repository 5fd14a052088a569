using Evenhand.Statistics.HypothesisTests;
using Evenhand.Statistics.Intervals;
using Evenhand.Testing;

namespace Evenhand.Statistics.Tests.Cases;

/// <summary>Stratified tables against tests/data/cases/public_cases.json; each difference cites the case's source.</summary>
public sealed class StratifiedCaseTests
{
    private readonly CaseComparison _comparison = new();

    [Theory]
    [InlineData("stratified", 10, (9 * 16) + 5)]
    [InlineData("simpson", 3, 3 * 16)]
    public void MantelHaenszel_ReferenceCases_Agree(string topic, int cases, int compared)
    {
        IReadOnlyList<ReferenceCase> all = ReferenceCases.Load(topic);
        foreach (ReferenceCase c in all)
        {
            CompareOddsRatio(c, Flatten(c));
            CompareOthers(c, Flatten(c));
        }

        Assert.Equal(cases, all.Count);
        Assert.True(_comparison.Differences.Length == 0, _comparison.Differences);
        Assert.Equal(compared, _comparison.Compared);
    }

    private void CompareOddsRatio(ReferenceCase c, long[] strata)
    {
        Estimate ratio = MantelHaenszel.OddsRatio(strata, 0.95);
        foreach (string name in new[] { "or_mh", "or" })
        {
            _comparison.Number(c, name, ratio.Value);
        }

        foreach (string name in new[] { "ci_rbg", "ci" })
        {
            _comparison.Ends(c, name, ratio.Interval.Low, ratio.Interval.High);
        }

        _comparison.Number(c, "se_log_or_rbg", Math.Log(ratio.Interval.High / ratio.Value) / NormalQuantile);
        long[] crude = [.. Enumerable.Range(0, 4).Select(cell => strata.Where((_, i) => i % 4 == cell).Sum())];
        Interval woolf = WoolfOddsRatio.Of(crude[0], crude[1], crude[2], crude[3], 0.95);
        _comparison.Number(c, "crude_or", Math.Sqrt(woolf.Low * woolf.High));
    }

    private void CompareOthers(ReferenceCase c, long[] strata)
    {
        Estimate difference = MantelHaenszel.RiskDifference(strata, 0.95);
        _comparison.Number(c, "rd_mh", difference.Value);
        _comparison.Ends(c, "rd_ci_sato", difference.Interval.Low, difference.Interval.High);
        ChiSquareResult plain = MantelHaenszel.Test(strata);
        _comparison.Number(c, "cmh_chisq", plain.Statistic);
        _comparison.Tail(c, "cmh_p", plain.P);
        ChiSquareResult corrected = MantelHaenszel.Test(strata, continuityCorrection: true);
        _comparison.Number(c, "cmh_chisq_cc", corrected.Statistic);
        _comparison.Number(c, "stat_cc", corrected.Statistic);
        _comparison.Tail(c, "p_cc", corrected.P);
        ChiSquareResult homogeneity = MantelHaenszel.BreslowDay(strata);
        _comparison.Number(c, "breslow_day", homogeneity.Statistic);
        _comparison.Tail(c, "breslow_day_p", homogeneity.P);
        _comparison.Number(c, "df", homogeneity.DegreesOfFreedom);
        ChiSquareResult tarone = MantelHaenszel.Tarone(strata);
        _comparison.Number(c, "tarone", tarone.Statistic);
        _comparison.Tail(c, "tarone_p", tarone.P);
    }

    // The 0.975 quantile of the standard normal distribution, as any table has it.
    private const double NormalQuantile = 1.959963984540054;

    private static long[] Flatten(ReferenceCase c)
    {
        long[] a = c.Counts("group1_event");
        long[] b = c.Counts("group1_nonevent");
        long[] d = c.Counts("group2_nonevent");
        return [.. c.Counts("group2_event").SelectMany((count, i) => new[] { a[i], b[i], count, d[i] })];
    }
}
