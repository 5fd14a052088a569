using CsCheck;
using Evenhand.Statistics.HypothesisTests;

namespace Evenhand.Statistics.Tests.HypothesisTests;

public sealed class PooledTwoProportionZTests
{
    /// <summary>Source: Fleiss (1981), section 2.1: Z² is Pearson's chi-square.</summary>
    [Fact]
    public void Test_AnyCounts_SquaresToPearson() =>
        Counts.TwoGroups(1_000_000).Where(c => c.X1 + c.X2 > 0 && c.X1 + c.X2 < c.N1 + c.N2).Sample(c =>
        {
            (double z, double p) = PooledTwoProportionZ.Test(c.X1, c.N1, c.X2, c.N2);
            ChiSquareResult pearson = PearsonTest.Test([c.X1, c.N1 - c.X1, c.X2, c.N2 - c.X2], columns: 2);
            Assert.Equal(pearson.Statistic, z * z, 1e-6 + (1e-9 * pearson.Statistic));
            Assert.Equal(1, pearson.DegreesOfFreedom);
            Assert.Equal(pearson.P, p, 1e-3 * p + 1e-6);
        });

    [Fact]
    public void Test_NothingToCompare_IsNaN()
    {
        foreach (TwoProportionZ result in new[]
        {
            PooledTwoProportionZ.Test(0, 0, 3, 7),
            PooledTwoProportionZ.Test(3, 7, 0, 0),
            PooledTwoProportionZ.Test(0, 5, 0, 7),
            PooledTwoProportionZ.Test(5, 5, 7, 7),
        })
        {
            Assert.Equal(new TwoProportionZ(double.NaN, double.NaN), result);
        }
    }
}
