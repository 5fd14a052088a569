using CsCheck;
using Evenhand.Statistics.HypothesisTests;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Statistics.Tests.Intervals;

public sealed class ClopperPearsonTests
{
    /// <summary>Source: the definition (Clopper and Pearson 1934): at each end the tail beyond the count has probability (1 − level)/2.</summary>
    [Fact]
    public void Of_AnyCounts_LeavesHalfTheErrorInEachTail() =>
        Counts.OneGroup(20_000).Select(Counts.Level).Sample(
            ((long X, long N) c, double level) =>
            {
                Interval interval = ClopperPearson.Of(c.X, c.N, level);
                double tail = (1 - level) / 2;
                if (c.X > 0)
                {
                    Relative.Equal(tail, BinomialTail.Upper(c.X, c.N, interval.Low), 1e-9);
                }

                if (c.X < c.N)
                {
                    Relative.Equal(tail, BinomialTail.Lower(c.X, c.N, interval.High), 1e-9);
                }
            },
            iter: 50);

    /// <summary>Source: closed form, 1 − (α/2)^(1/n) above no success.</summary>
    [Theory]
    [InlineData(1)]
    [InlineData(20)]
    [InlineData(1000)]
    public void Of_NoSuccess_MatchesClosedForm(long n)
    {
        Interval interval = ClopperPearson.Of(0, n, 0.95);
        Assert.Equal(0, interval.Low);
        Relative.Equal(1 - Math.Exp(Math.Log(0.025) / n), interval.High, 1e-11);
        Assert.Equal(1, ClopperPearson.Of(n, n, 0.95).High);
    }

    [Fact]
    public void Of_NoTrials_IsUndefined() => Assert.Equal(Interval.Undefined, ClopperPearson.Of(0, 0, 0.95));
}
