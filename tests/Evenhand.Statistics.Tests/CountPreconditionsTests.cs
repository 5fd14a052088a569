using Evenhand.Statistics.HypothesisTests;
using Evenhand.Statistics.Intervals;

namespace Evenhand.Statistics.Tests;

/// <summary>Counts that cannot be are refused everywhere, by the name of the parameter.</summary>
public sealed class CountPreconditionsTests
{
    public static TheoryData<string, Action<long, long, long, long>> TwoGroupProcedures { get; } = new()
    {
        { "Newcombe", (x1, n1, x2, n2) => NewcombeDifference.Of(x1, n1, x2, n2, 0.95) },
        { "Katz", (x1, n1, x2, n2) => KatzRatio.Of(x1, n1, x2, n2, 0.95) },
        { "Koopman", (x1, n1, x2, n2) => KoopmanRatio.Of(x1, n1, x2, n2, 0.95) },
        { "Pooled z", (x1, n1, x2, n2) => PooledTwoProportionZ.Test(x1, n1, x2, n2) },
    };

    public static TheoryData<string, Action<long, long>> OneGroupProcedures { get; } = new()
    {
        { "Wilson", (x, n) => WilsonInterval.Of(x, n, 0.95) },
        { "Clopper-Pearson", (x, n) => ClopperPearson.Of(x, n, 0.95) },
    };

    public static TheoryData<string, Action<long, long, long, long>> TableProcedures { get; } = new()
    {
        { "Woolf", (a, b, c, d) => WoolfOddsRatio.Of(a, b, c, d, 0.95) },
        { "Fisher", (a, b, c, d) => FisherExact.TwoSided(a, b, c, d) },
    };

    [Theory]
    [MemberData(nameof(TwoGroupProcedures), DisableDiscoveryEnumeration = true)]
    public void TwoGroups_ImpossibleCounts_NameTheParameter(string procedure, Action<long, long, long, long> run)
    {
        Assert.NotEmpty(procedure);
        Assert.Equal("x1", Refused(() => run(-1, 5, 2, 5)));
        Assert.Equal("x1", Refused(() => run(6, 5, 2, 5)));
        Assert.Equal("n1", Refused(() => run(0, -5, 2, 5)));
        Assert.Equal("x2", Refused(() => run(2, 5, -1, 5)));
        Assert.Equal("x2", Refused(() => run(2, 5, 6, 5)));
        Assert.Equal("n2", Refused(() => run(2, 5, 0, -5)));
    }

    [Theory]
    [MemberData(nameof(OneGroupProcedures), DisableDiscoveryEnumeration = true)]
    public void OneGroup_ImpossibleCounts_NameTheParameter(string procedure, Action<long, long> run)
    {
        Assert.NotEmpty(procedure);
        Assert.Equal("successes", Refused(() => run(-1, 5)));
        Assert.Equal("successes", Refused(() => run(6, 5)));
        Assert.Equal("n", Refused(() => run(0, -1)));
    }

    [Theory]
    [MemberData(nameof(TableProcedures), DisableDiscoveryEnumeration = true)]
    public void Table_NegativeCounts_NameTheParameter(string procedure, Action<long, long, long, long> run)
    {
        Assert.NotEmpty(procedure);
        Assert.Equal("a", Refused(() => run(-1, 1, 1, 1)));
        Assert.Equal("b", Refused(() => run(1, -1, 1, 1)));
        Assert.Equal("c", Refused(() => run(1, 1, -1, 1)));
        Assert.Equal("d", Refused(() => run(1, 1, 1, -1)));
    }

    [Fact]
    public void Lists_WrongShapeOrNegative_NameTheParameter()
    {
        Assert.Equal("strata", Assert.Throws<ArgumentException>(() => MantelHaenszel.OddsRatio([1, 2, 3], 0.95)).ParamName);
        Assert.Equal("strata", Refused(() => MantelHaenszel.RiskDifference([1, 2, 3, -4], 0.95)));
        Assert.Equal("counts", Assert.Throws<ArgumentException>(() => GTest.Test([1, 2, 3], 2)).ParamName);
        Assert.Equal("counts", Refused(() => PearsonTest.Test([1, 2, 3, -4], 2)));
        Assert.Equal("columns", Refused(() => GTest.Test([1, 2, 3], 0)));
        Assert.Equal("x", Refused(() => BinomialTail.Lower(4, 3, 0.5)));
        Assert.Equal("p", Refused(() => BinomialTail.Upper(1, 3, 1.5)));
    }

    private static string? Refused(Action run) => Assert.Throws<ArgumentOutOfRangeException>(run).ParamName;
}
