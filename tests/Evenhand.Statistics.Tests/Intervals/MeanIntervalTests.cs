using CsCheck;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Statistics.Tests.Intervals;

public sealed class MeanIntervalTests
{
    // Hours of sleep gained with each of two drugs: Student (1908), The probable error of a mean, Biometrika 6.
    private static readonly double[] _first = [0.7, -1.6, -0.2, -1.2, -0.1, 3.4, 3.7, 0.8, 0.0, 2.0];
    private static readonly double[] _second = [1.9, 0.8, 1.1, 0.1, -0.1, 4.4, 5.5, 1.6, 4.6, 3.4];

    /// <summary>Source: Student's data; the ends are those R's t.test prints for them, values from memory.</summary>
    [Fact]
    public void Of_StudentsSleepDifferences_MatchesTheKnownInterval()
    {
        Moments moments = Moments.Of([.. _first.Zip(_second, (a, b) => a - b)]);
        Interval interval = MeanInterval.Of(moments, 0.95);
        Assert.Equal(-1.58, moments.Mean, 1e-14);
        Assert.Equal(-2.4598858, interval.Low, 5e-8);
        Assert.Equal(-0.7001142, interval.High, 5e-8);
    }

    /// <summary>Source: as above, the two drugs as independent samples with unequal variances; values from memory.</summary>
    [Fact]
    public void Welch_StudentsSleepData_MatchesTheKnownInterval()
    {
        Interval interval = WelchDifference.Of(Moments.Of(_first), Moments.Of(_second), 0.95);
        Assert.Equal(-3.3654832, interval.Low, 5e-8);
        Assert.Equal(0.2054832, interval.High, 5e-8);
    }

    /// <summary>Source: equal variances and counts give 2(n − 1) degrees of freedom, the classical two-sample interval.</summary>
    [Fact]
    public void Welch_EqualVariancesAndCounts_IsTheClassicalInterval() =>
        (from n in Gen.Int[2, 500] from v in Gen.Double[0.01, 100] select (n, v)).Sample(((int N, double V) s) =>
        {
            Interval interval = WelchDifference.Of(new Moments(s.N, 5, s.V), new Moments(s.N, 3, s.V), 0.95);
            double reach = Evenhand.Statistics.Distributions.Quantiles.TwoSidedStudent(0.95, 2 * (s.N - 1)) * Math.Sqrt(2 * s.V / s.N);
            Relative.Equal(2 + reach, interval.High, 1e-10);
            Assert.Equal(4, interval.Low + interval.High, 1e-9);
        });

    /// <summary>Source: Bonett (2008) with equal variances and counts reduces to (d² + 8)/(4(n − 1)).</summary>
    [Fact]
    public void Standardized_EqualVariancesAndCounts_HasTheReducedVariance() =>
        (from n in Gen.Int[2, 500] from d in Gen.Double[-3, 3] select (n, d)).Sample(((int N, double D) s) =>
        {
            Estimate estimate = StandardizedMeanDifference.Of(new Moments(s.N, s.D * 7, 49), new Moments(s.N, 0, 49), 0.95);
            double reach = 1.959963984540054 * Math.Sqrt(((s.D * s.D) + 8) / (4 * (s.N - 1)));
            Assert.Equal(s.D, estimate.Value, 1e-12);
            Assert.Equal(s.D + reach, estimate.Interval.High, 1e-9);
            Assert.Equal(s.D - reach, estimate.Interval.Low, 1e-9);
        });

    [Fact]
    public void Standardized_UnitsAndOriginChanged_StaysTheSame()
    {
        Estimate before = StandardizedMeanDifference.Of(new Moments(30, 5, 4), new Moments(50, 3, 9), 0.9);
        Estimate after = StandardizedMeanDifference.Of(new Moments(30, 500 + 32, 40_000), new Moments(50, 300 + 32, 90_000), 0.9);
        Assert.Equal(before.Value, after.Value, 1e-14);
        Assert.Equal(before.Interval.Low, after.Interval.Low, 1e-14);
    }

    [Fact]
    public void Of_FewerThanTwoValues_IsUndefined()
    {
        Moments none = Moments.Of([]);
        Moments one = Moments.Of([3]);
        Moments many = Moments.Of(_first);
        Assert.Equal(new Moments(0, double.NaN, double.NaN), none);
        Assert.Equal(new Moments(1, 3, double.NaN), one);
        Assert.Equal(Interval.Undefined, MeanInterval.Of(none, 0.95));
        Assert.Equal(Interval.Undefined, MeanInterval.Of(one, 0.95));
        Assert.Equal(Interval.Undefined, WelchDifference.Of(one, many, 0.95));
        Assert.Equal(Interval.Undefined, WelchDifference.Of(many, none, 0.95));
        Assert.Equal(Estimate.Undefined, StandardizedMeanDifference.Of(many, one, 0.95));
    }

    [Fact]
    public void Of_ValuesThatDoNotVary_HasNoWidth()
    {
        Moments flat = Moments.Of([2, 2, 2]);
        Assert.Equal(new Interval(2, 2), MeanInterval.Of(flat, 0.95));
        Assert.Equal(new Interval(0, 0), WelchDifference.Of(flat, flat, 0.95));
        Assert.Equal(Estimate.Undefined, StandardizedMeanDifference.Of(flat, flat, 0.95));
    }

    [Fact]
    public void Of_NegativeVariance_NamesTheGroup()
    {
        Moments wrong = new(5, 1, -1);
        Moments right = new(5, 1, 1);
        Assert.Equal("moments", Assert.Throws<ArgumentOutOfRangeException>(() => MeanInterval.Of(wrong, 0.95)).ParamName);
        Assert.Equal("m1", Assert.Throws<ArgumentOutOfRangeException>(() => WelchDifference.Of(wrong, right, 0.95)).ParamName);
        Assert.Equal("m2", Assert.Throws<ArgumentOutOfRangeException>(() => StandardizedMeanDifference.Of(right, wrong, 0.95)).ParamName);
    }
}
