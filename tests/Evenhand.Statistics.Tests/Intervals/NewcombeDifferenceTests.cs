using CsCheck;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Statistics.Tests.Intervals;

public sealed class NewcombeDifferenceTests
{
    [Fact]
    public void Of_GroupsExchanged_ChangesSignAndEnds() =>
        Counts.TwoGroups(100_000).Select(Counts.Level).Sample(((long X1, long N1, long X2, long N2) c, double level) =>
        {
            Interval there = NewcombeDifference.Of(c.X1, c.N1, c.X2, c.N2, level);
            Interval back = NewcombeDifference.Of(c.X2, c.N2, c.X1, c.N1, level);
            Assert.Equal(-there.High, back.Low, 1e-15);
            Assert.Equal(-there.Low, back.High, 1e-15);
        });

    [Fact]
    public void Of_SuccessAndFailureExchanged_ChangesSignAndEnds() =>
        Counts.TwoGroups(100_000).Sample(c =>
        {
            Interval successes = NewcombeDifference.Of(c.X1, c.N1, c.X2, c.N2, 0.95);
            Interval failures = NewcombeDifference.Of(c.N1 - c.X1, c.N1, c.N2 - c.X2, c.N2, 0.95);
            Assert.Equal(-successes.High, failures.Low, 1e-14);
        });

    [Fact]
    public void Of_AnyCounts_StaysWithinOne() =>
        Counts.TwoGroups(1000).Sample(c =>
        {
            Interval interval = NewcombeDifference.Of(c.X1, c.N1, c.X2, c.N2, 0.99);
            double difference = ((double)c.X1 / c.N1) - ((double)c.X2 / c.N2);
            Assert.True(interval.Low >= -1 && interval.Low <= difference && difference <= interval.High && interval.High <= 1);
        });

    [Fact]
    public void Of_AnEmptyGroup_IsUndefined()
    {
        Assert.Equal(Interval.Undefined, NewcombeDifference.Of(0, 0, 3, 7, 0.95));
        Assert.Equal(Interval.Undefined, NewcombeDifference.Of(3, 7, 0, 0, 0.95));
    }
}
