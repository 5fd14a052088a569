using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.Tests.Distributions;

public sealed class TailsTests
{
    /// <summary>Source: the complementary error function at 50 digits (mpmath 1.2.1).</summary>
    [Theory]
    [InlineData(0, 1)]
    [InlineData(1, 0.3173105078629141)]
    [InlineData(5.001388204008377, 5.6918969737408612e-7)]
    [InlineData(27.771419943186, 9.6069978578389515e-170)]
    [InlineData(37, 1.1451142445049154e-299)]
    [InlineData(37.5, 9.2107060191639097e-308)]
    public void TwoSidedNormalTail_EitherSign_MatchesHighPrecision(double z, double expected)
    {
        Relative.Equal(expected, Tails.TwoSidedNormalTail(z), 1e-12);
        Relative.Equal(expected, Tails.TwoSidedNormalTail(-z), 1e-12);
    }

    /// <summary>Source: the upper incomplete gamma function at 50 digits (mpmath 1.2.1).</summary>
    [Theory]
    [InlineData(0.001, 1, 0.97477287936996039)]
    [InlineData(3.841458820694124, 1, 0.050000000000000058)]
    [InlineData(771.251765660791, 1, 9.606997857829772e-170)]
    [InlineData(1370, 1, 6.9429373646432677e-300)]
    [InlineData(1, 2, 0.60653065971263342)]
    [InlineData(1380, 2, 2.171738281389827e-300)]
    [InlineData(12.6004112971276, 3, 0.0055854766616271262)]
    [InlineData(0.5, 4, 0.97350097883925609)]
    [InlineData(62.71635812806548, 9, 4.0039030327225806e-10)]
    [InlineData(1400, 9, 7.7309942439991564e-296)]
    [InlineData(5, 50, 0.99999999999999995)]
    [InlineData(1500, 50, 3.1769336718753438e-281)]
    [InlineData(300, 299, 0.47285048381716997)]
    [InlineData(1800, 299, 2.6566477020854331e-212)]
    public void ChiSquareTail_NearAndFar_MatchesHighPrecision(double x, double df, double expected) =>
        Relative.Equal(expected, Tails.ChiSquareTail(x, df), 1e-11);

    [Fact]
    public void ChiSquareTail_Edges_AreLimits()
    {
        Assert.Equal(1, Tails.ChiSquareTail(0, 3));
        Assert.Equal(0, Tails.ChiSquareTail(double.PositiveInfinity, 3));
        Assert.Equal(double.NaN, Tails.ChiSquareTail(double.NaN, 3));
        Assert.Equal("df", Assert.Throws<ArgumentOutOfRangeException>(() => Tails.ChiSquareTail(1, 0)).ParamName);
    }
}
