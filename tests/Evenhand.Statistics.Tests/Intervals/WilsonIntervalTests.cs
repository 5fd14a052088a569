using CsCheck;
using Evenhand.Statistics.Distributions;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Statistics.Tests.Intervals;

public sealed class WilsonIntervalTests
{
    /// <summary>Source: the definition of the interval (Wilson 1927): (p − θ)² = z² θ (1 − θ)/n at both ends.</summary>
    [Fact]
    public void Of_AnyCounts_SolvesTheDefiningQuadratic() =>
        Counts.OneGroup(1_000_000_000).Select(Counts.Level).Sample(((long X, long N) c, double level) =>
        {
            double z = Quantiles.TwoSidedNormal(level);
            double p = (double)c.X / c.N;
            Interval interval = WilsonInterval.Of(c.X, c.N, level);
            foreach (double end in new[] { interval.Low, interval.High })
            {
                // θ − p alone loses digits for huge n, hence the floor of a few units in the last place of p.
                double distance = Math.Abs(p - end);
                Assert.Equal(z * Math.Sqrt(end * (1 - end) / c.N), distance, 1e-14 + (1e-9 * distance));
            }

            Assert.True(interval.Low >= 0 && interval.Low <= p && interval.High >= p && interval.High <= 1);
        });

    [Fact]
    public void Of_RateAndTrials_EqualsCounts() =>
        Counts.OneGroup(100_000).Select(Counts.Level).Sample(((long X, long N) c, double level) =>
        {
            Interval counts = WilsonInterval.Of(c.X, c.N, level);
            Interval rate = WilsonInterval.Of((double)c.X / c.N, (double)c.N, level);
            Assert.Equal(counts.Low, rate.Low, 1e-14);
            Assert.Equal(counts.High, rate.High, 1e-14);
        });

    [Fact]
    public void Of_NoSuccessOrNoFailure_IsExactAtTheExtreme()
    {
        Assert.Equal(0, WilsonInterval.Of(0, 7, 0.95).Low);
        Assert.Equal(1, WilsonInterval.Of(7, 7, 0.95).High);
        Assert.Equal(0, WilsonInterval.Of(0.0, 7.3, 0.95).Low);
        Assert.Equal(1, WilsonInterval.Of(1.0, 7.3, 0.95).High);
    }

    [Fact]
    public void Of_NoTrials_IsUndefined()
    {
        Assert.Equal(Interval.Undefined, WilsonInterval.Of(0, 0, 0.95));
        Assert.Equal(Interval.Undefined, WilsonInterval.Of(0.5, 0, 0.95));
        Assert.Equal(Interval.Undefined, WilsonInterval.Of(double.NaN, 10, 0.95));
        Assert.Equal(Interval.Undefined, WilsonInterval.Of(0.5, double.NaN, 0.95));
    }

    [Theory]
    [InlineData(-0.1, 10, "p")]
    [InlineData(1.1, 10, "p")]
    [InlineData(0.5, -1, "n")]
    [InlineData(0.5, double.PositiveInfinity, "n")]
    public void Of_ImpossibleRate_NamesTheParameter(double p, double n, string name) =>
        Assert.Equal(name, Assert.Throws<ArgumentOutOfRangeException>(() => WilsonInterval.Of(p, n, 0.95)).ParamName);
}
