using CsCheck;
using Evenhand.Statistics.HypothesisTests;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Statistics.Tests.HypothesisTests;

public sealed class MantelHaenszelTests
{
    private static readonly long[] _twoStrata = [12, 30, 8, 41, 5, 9, 14, 22];

    /// <summary>Source: with one stratum the weights cancel (Mantel and Haenszel 1959), and the test is Pearson's times (N − 1)/N.</summary>
    [Fact]
    public void Everything_OneStratum_IsThePlainTable() =>
        Gen.Long[1, 5000].Array[4].Sample(t =>
        {
            double ratio = (double)t[0] * t[3] / ((double)t[1] * t[2]);
            Relative.Equal(ratio, MantelHaenszel.OddsRatio(t, 0.95).Value, 1e-12);
            double difference = ((double)t[0] / (t[0] + t[1])) - ((double)t[2] / (t[2] + t[3]));
            Assert.Equal(difference, MantelHaenszel.RiskDifference(t, 0.95).Value, 1e-12);
            double total = t.Sum();
            double pearson = PearsonTest.Test(t, columns: 2).Statistic;
            Assert.Equal(pearson * (total - 1) / total, MantelHaenszel.Test(t).Statistic, 1e-8 + (1e-9 * pearson));
            Interval woolf = WoolfOddsRatio.Of(t[0], t[1], t[2], t[3], 0.95);
            Relative.Equal(woolf.Low, MantelHaenszel.OddsRatio(t, 0.95).Interval.Low, 1e-10);
        });

    /// <summary>Source: the definition (Breslow and Day 1980, section 4.4), each fitted table found by bisection on its odds ratio.</summary>
    [Fact]
    public void BreslowDay_AnyStrata_MatchesDirectSolution() =>
        Counts.Strata(2, 6, 200).Where(s => double.IsFinite(MantelHaenszel.OddsRatio(s, 0.95).Value) && MantelHaenszel.OddsRatio(s, 0.95).Value > 0).Sample(strata =>
        {
            (double statistic, double correction, int informative) = Direct(strata);
            ChiSquareResult plain = MantelHaenszel.BreslowDay(strata);
            Assert.Equal(Math.Max(0, informative - 1), plain.DegreesOfFreedom);
            if (informative > 1)
            {
                Assert.Equal(statistic, plain.Statistic, 1e-6 * (1 + statistic));
                Assert.Equal(statistic - correction, MantelHaenszel.Tarone(strata).Statistic, 1e-6 * (1 + statistic));
            }
        });

    /// <summary>Source: fitted tables by bisection at 60 digits (mpmath 1.2.1); odds ratios so extreme that one form of the root cancels.</summary>
    [Theory]
    [InlineData(new long[] { 3, 1_000_000, 1_000_000, 5, 1, 400_000, 300_000, 20 }, 4.53421141383182, 2.65040126206799)]
    [InlineData(new long[] { 1_000_000, 3, 5, 1_000_000, 400_000, 1, 20, 300_000 }, 4.53421141383182, 2.65040126206799)]
    [InlineData(new long[] { 5, 1_000_000, 1_000_000, 3, 20, 300_000, 400_000, 1 }, 4.53421141383182, 2.65040126206799)]
    [InlineData(new long[] { 2, 10_000_000, 10_000_000, 5_000_000, 9, 10_000_000, 10_000_000, 3_000_000 }, 2.00472080278621, 1.91601696602926)]
    public void BreslowDayAndTarone_ExtremeOddsRatios_MatchHighPrecision(long[] strata, double breslowDay, double tarone)
    {
        Relative.Equal(breslowDay, MantelHaenszel.BreslowDay(strata).Statistic, 1e-11);
        Relative.Equal(tarone, MantelHaenszel.Tarone(strata).Statistic, 1e-11);
    }

    [Fact]
    public void Everything_GroupsExchanged_ChangesSign() =>
        Counts.Strata(1, 5, 500).Sample(strata =>
        {
            long[] exchanged = [.. strata.Chunk(4).SelectMany(s => new[] { s[2], s[3], s[0], s[1] })];
            Estimate there = MantelHaenszel.RiskDifference(strata, 0.95);
            Estimate back = MantelHaenszel.RiskDifference(exchanged, 0.95);
            Assert.Equal(-there.Value, back.Value, 1e-12);
            Assert.Equal(-there.Interval.High, back.Interval.Low, 1e-12);
            Relative.Equal(1 / MantelHaenszel.OddsRatio(strata, 0.95).Value, MantelHaenszel.OddsRatio(exchanged, 0.95).Value, 1e-12);
        });

    /// <summary>Common practice, no source: strata with an empty group, or without events or non-events, carry no information on an odds ratio.</summary>
    [Theory]
    [InlineData(0, 0, 0, 0)]
    [InlineData(1, 0, 0, 0)]
    [InlineData(0, 0, 3, 4)]
    [InlineData(5, 6, 0, 0)]
    [InlineData(0, 7, 0, 9)]
    [InlineData(7, 0, 9, 0)]
    public void OddsRatioAndTests_AStratumWithAnEmptyMargin_ChangesNothing(long a, long b, long c, long d)
    {
        long[] padded = [a, b, c, d, .. _twoStrata];
        Assert.Equal(MantelHaenszel.OddsRatio(_twoStrata, 0.95), MantelHaenszel.OddsRatio(padded, 0.95));
        Assert.Equal(MantelHaenszel.Test(_twoStrata), MantelHaenszel.Test(padded));
        Assert.Equal(MantelHaenszel.BreslowDay(_twoStrata), MantelHaenszel.BreslowDay(padded));
        Assert.Equal(MantelHaenszel.Tarone(_twoStrata), MantelHaenszel.Tarone(padded));
    }

    [Fact]
    public void RiskDifference_AStratumWithoutEvents_CountsAsNoDifference()
    {
        double before = MantelHaenszel.RiskDifference(_twoStrata, 0.95).Value;
        Assert.Equal(before, MantelHaenszel.RiskDifference([0, 0, 3, 4, .. _twoStrata], 0.95).Value);
        Assert.InRange(MantelHaenszel.RiskDifference([0, 40, 0, 50, .. _twoStrata], 0.95).Value / before, 0, 0.99);
    }

    [Fact]
    public void OddsRatio_ZeroSums_HasNoInterval()
    {
        Assert.Equal(new Estimate(0, Interval.Undefined), MantelHaenszel.OddsRatio([0, 5, 3, 4], 0.95));
        Assert.Equal(new Estimate(double.PositiveInfinity, Interval.Undefined), MantelHaenszel.OddsRatio([3, 4, 0, 5], 0.95));
        Assert.Equal(Estimate.Undefined, MantelHaenszel.OddsRatio([], 0.95));
        Assert.Equal(Estimate.Undefined, MantelHaenszel.OddsRatio([0, 0, 3, 4], 0.95));
        Assert.Equal(Estimate.Undefined, MantelHaenszel.RiskDifference([0, 0, 3, 4], 0.95));
    }

    [Fact]
    public void Tests_NothingInformative_HaveNoDegreesOfFreedom()
    {
        ChiSquareResult nothing = new(double.NaN, 0, double.NaN);
        Assert.Equal(nothing, MantelHaenszel.Test([0, 0, 3, 4]));
        Assert.Equal(nothing, MantelHaenszel.BreslowDay([3, 4, 5, 6]));
        Assert.Equal(nothing, MantelHaenszel.BreslowDay([0, 5, 3, 4, 0, 5, 3, 4]));
    }

    [Fact]
    public void Test_CorrectionBeyondTheDistance_StopsAtZero()
    {
        ChiSquareResult result = MantelHaenszel.Test([5, 5, 5, 6], continuityCorrection: true);
        Assert.Equal(0, result.Statistic);
        Assert.Equal(1, result.P);
    }

    private static (double Statistic, double Correction, int Informative) Direct(long[] strata)
    {
        double ratio = MantelHaenszel.OddsRatio(strata, 0.95).Value;
        double statistic = 0, excess = 0, variance = 0;
        int informative = 0;
        foreach (long[] s in strata.Chunk(4))
        {
            double n1 = s[0] + s[1], n2 = s[2] + s[3], m = s[0] + s[2];
            if (n1 == 0 || n2 == 0 || m == 0 || m == n1 + n2)
            {
                continue;
            }

            double low = Math.Max(0, m - n2), high = Math.Min(n1, m);
            for (int i = 0; i < 200; i++)
            {
                double e = (low + high) / 2;
                (low, high) = e * (n2 - m + e) < ratio * (n1 - e) * (m - e) ? (e, high) : (low, e);
            }

            double v = 1 / ((1 / low) + (1 / (n1 - low)) + (1 / (m - low)) + (1 / (n2 - m + low)));
            statistic += (s[0] - low) * (s[0] - low) / v;
            excess += s[0] - low;
            variance += v;
            informative++;
        }

        return (statistic, excess * excess / variance, informative);
    }
}
