using CsCheck;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Statistics.Tests.Intervals;

/// <summary>The two intervals that are symmetric on the log scale; their values are checked against the reference cases.</summary>
public sealed class LogRatioTests
{
    [Fact]
    public void Katz_GroupsExchanged_Inverts() =>
        Counts.TwoGroups(1_000_000).Where(c => c.X1 > 0 && c.X2 > 0).Sample(c =>
        {
            Interval there = KatzRatio.Of(c.X1, c.N1, c.X2, c.N2, 0.9);
            Relative.Equal(1 / there.High, KatzRatio.Of(c.X2, c.N2, c.X1, c.N1, 0.9).Low, 1e-13);
        });

    [Fact]
    public void Katz_NoSuccesses_IsUndefined()
    {
        Assert.Equal(Interval.Undefined, KatzRatio.Of(0, 10, 5, 10, 0.95));
        Assert.Equal(Interval.Undefined, KatzRatio.Of(5, 10, 0, 10, 0.95));
        Assert.Equal(Interval.Undefined, KatzRatio.Of(0, 0, 5, 10, 0.95));
        Assert.Equal(new Interval(1, 1), KatzRatio.Of(3, 3, 8, 8, 0.95));
    }

    [Fact]
    public void Woolf_RowsOrColumnsExchanged_Inverts() =>
        Gen.Long[1, 1_000_000].Array[4].Sample(t =>
        {
            Interval there = WoolfOddsRatio.Of(t[0], t[1], t[2], t[3], 0.95);
            Relative.Equal(1 / there.High, WoolfOddsRatio.Of(t[2], t[3], t[0], t[1], 0.95).Low, 1e-13);
            Relative.Equal(1 / there.High, WoolfOddsRatio.Of(t[1], t[0], t[3], t[2], 0.95).Low, 1e-13);
        });

    [Theory]
    [InlineData(0, 1, 1, 1)]
    [InlineData(1, 0, 1, 1)]
    [InlineData(1, 1, 0, 1)]
    [InlineData(1, 1, 1, 0)]
    public void Woolf_AZeroCell_IsUndefined(long a, long b, long c, long d) =>
        Assert.Equal(Interval.Undefined, WoolfOddsRatio.Of(a, b, c, d, 0.95));
}
