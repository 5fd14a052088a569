using Evenhand.Statistics.HypothesisTests;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Statistics.Tests;

/// <summary>The procedures run once a reading and group, so they work on the stack alone.</summary>
public sealed class AllocationTests
{
    private static readonly long[] _strata = [12, 30, 8, 41, 5, 9, 14, 22];

    [Fact]
    public void Procedures_OnceWarm_AllocateNothing()
    {
        double sink = Run();
        long before = GC.GetAllocatedBytesForCurrentThread();
        sink += Run();
        long allocated = GC.GetAllocatedBytesForCurrentThread() - before;
        Assert.Equal(0, allocated);
        Assert.True(double.IsFinite(sink));
    }

    private static double Run()
    {
        Moments m1 = new(30, 5, 4);
        Moments m2 = new(50, 3, 9);
        return WilsonInterval.Of(3, 10, 0.95).Low
            + ClopperPearson.Of(3, 10, 0.95).Low
            + NewcombeDifference.Of(3, 10, 5, 12, 0.95).Low
            + KatzRatio.Of(3, 10, 5, 12, 0.95).Low
            + KoopmanRatio.Of(3, 10, 5, 12, 0.95).Low
            + WoolfOddsRatio.Of(3, 7, 5, 7, 0.95).Low
            + MeanInterval.Of(m1, 0.95).Low
            + WelchDifference.Of(m1, m2, 0.95).Low
            + StandardizedMeanDifference.Of(m1, m2, 0.95).Value
            + PooledTwoProportionZ.Test(3, 10, 5, 12).P
            + FisherExact.TwoSided(3, 7, 5, 7)
            + BinomialTail.Upper(3, 10, 0.3)
            + GTest.Test(_strata, 4).P
            + PearsonTest.Test(_strata, 4).P
            + MantelHaenszel.OddsRatio(_strata, 0.95).Value
            + MantelHaenszel.RiskDifference(_strata, 0.95).Value
            + MantelHaenszel.Test(_strata).P
            + MantelHaenszel.BreslowDay(_strata).P
            + MantelHaenszel.Tarone(_strata).P;
    }
}
