using CsCheck;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Statistics.Tests.Intervals;

/// <summary>Source of the checks: Zou and Donner (2008); symmetric parts recover the variance of a difference.</summary>
public sealed class MoverTests
{
    [Fact]
    public void Difference_SymmetricParts_RecoversTheVarianceOfADifference() =>
        (from a in Gen.Double[0, 5]
         from b in Gen.Double[0, 5]
         from r in Gen.Double[-1, 1]
         select (a, b, r)).Sample(((double A, double B, double R) s) =>
        {
            Interval interval = Mover.Difference(3, new Interval(3 - s.A, 3 + s.A), 1, new Interval(1 - s.B, 1 + s.B), s.R);
            double reach = Math.Sqrt(Math.Max(0, (s.A * s.A) + (s.B * s.B) - (2 * s.R * s.A * s.B)));
            Assert.Equal(2 - reach, interval.Low, 1e-6);
            Assert.Equal(2 + reach, interval.High, 1e-6);
        });

    [Fact]
    public void Difference_OneEstimateTwice_HasNoWidth()
    {
        Interval part = new(0.2, 0.4);
        Interval interval = Mover.Difference(0.3, part, 0.3, part, correlation: 1);
        Assert.Equal(0, interval.Low, 1e-15);
        Assert.Equal(0, interval.High, 1e-15);
    }

    [Fact]
    public void Difference_AnUnboundedOrUndefinedPart_ReachesTheEndsThatNeedIt()
    {
        Interval unbounded = Mover.Difference(1, new Interval(0.5, double.PositiveInfinity), 0, new Interval(-1, 1));
        Assert.True(double.IsFinite(unbounded.Low));
        Assert.Equal(double.PositiveInfinity, unbounded.High);
        Assert.Equal(Interval.Undefined, Mover.Difference(1, Interval.Undefined, 0, new Interval(-1, 1)));
    }

    [Fact]
    public void Difference_ImpossibleCorrelation_NamesIt() =>
        Assert.Equal(
            "correlation",
            Assert.Throws<ArgumentOutOfRangeException>(() => Mover.Difference(1, default, 0, default, 1.5)).ParamName);
}
