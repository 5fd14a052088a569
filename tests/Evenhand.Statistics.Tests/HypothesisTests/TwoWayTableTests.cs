using CsCheck;
using Evenhand.Statistics.HypothesisTests;

namespace Evenhand.Statistics.Tests.HypothesisTests;

public sealed class TwoWayTableTests
{
    /// <summary>Source: the definition 2 Σ O ln(O/E) (Wilks 1935), term by term.</summary>
    [Fact]
    public void GTest_AnyTable_MatchesTheDefinition() =>
        Gen.Long[0, 1000].Array[12].Sample(t =>
        {
            double total = t.Sum();
            double sum = 0;
            for (int i = 0; i < t.Length; i++)
            {
                double row = t.Skip(i / 3 * 3).Take(3).Sum();
                double column = t.Where((_, k) => k % 3 == i % 3).Sum();
                sum += t[i] == 0 ? 0 : t[i] * Math.Log(t[i] / (row * column / total));
            }

            ChiSquareResult result = GTest.Test(t, columns: 3);
            Assert.Equal(2 * sum, result.Statistic, 1e-9 + (1e-10 * Math.Abs(sum)));
        });

    [Fact]
    public void Tests_RowsAndColumnsWithoutCounts_AreLeftOut()
    {
        ChiSquareResult plain = GTest.Test([3, 5, 8, 2], columns: 2);
        ChiSquareResult padded = GTest.Test([3, 0, 5, 0, 0, 0, 8, 0, 2], columns: 3);
        Assert.Equal(plain.DegreesOfFreedom, padded.DegreesOfFreedom);
        Assert.Equal(plain.Statistic, padded.Statistic, 1e-13);
        Assert.Equal(1, PearsonTest.Test([3, 0, 5, 0, 0, 0, 8, 0, 2], columns: 3).DegreesOfFreedom);
    }

    [Fact]
    public void Tests_ExactProportionality_FindsNothing()
    {
        ChiSquareResult result = GTest.Test([10, 20, 30, 60], columns: 2);
        Assert.Equal(0, result.Statistic, 1e-12);
        Assert.Equal(1, result.P, 1e-6);
    }

    [Fact]
    public void Tests_OneRowOrNone_IsNaN()
    {
        Assert.Equal(new ChiSquareResult(double.NaN, 0, double.NaN), GTest.Test([3, 4], columns: 2));
        Assert.Equal(new ChiSquareResult(double.NaN, 0, double.NaN), PearsonTest.Test([], columns: 2));
    }
}
