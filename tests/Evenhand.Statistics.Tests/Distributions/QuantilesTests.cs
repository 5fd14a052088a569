using CsCheck;
using Evenhand.Statistics.Distributions;

namespace Evenhand.Statistics.Tests.Distributions;

public sealed class QuantilesTests
{
    /// <summary>Source: the inverse error function at 60 digits (mpmath 1.2.1).</summary>
    [Theory]
    [InlineData(0.5, 0.67448975019608174)]
    [InlineData(0.8, 1.2815515655446005)]
    [InlineData(0.9, 1.6448536269514727)]
    [InlineData(0.95, 1.9599639845400542)]
    [InlineData(0.99, 2.5758293035489008)]
    [InlineData(0.999, 3.2905267314918948)]
    [InlineData(0.999999, 4.8916384756985904)]
    public void TwoSidedNormal_UsualLevels_MatchesHighPrecision(double level, double expected) =>
        Relative.Equal(expected, Quantiles.TwoSidedNormal(level), 2e-11);

    /// <summary>Source: the incomplete beta function inverted at 40 digits (mpmath 1.2.1); from 20 000 on by quadrature of the density.</summary>
    [Theory]
    [InlineData(0.95, 1, 12.706204736174705)]
    [InlineData(0.95, 2.5, 3.5746548420036832)]
    [InlineData(0.99, 7, 3.4994832973504939)]
    [InlineData(0.95, 17.776473516178495, 2.1028172415698024)]
    [InlineData(0.95, 30, 2.0422724563012383)]
    [InlineData(0.9999, 3, 28.000130010948975)]
    [InlineData(0.95, 250.5, 1.9694792720516764)]
    [InlineData(0.999, 5000, 3.2924737233708513)]
    [InlineData(0.95, 10000, 1.9602012398906263)]
    [InlineData(0.95, 20000, 1.960082605158135)]
    [InlineData(0.999999, 20000, 4.893163131925962)]
    public void TwoSidedStudent_KnownPoints_MatchesHighPrecision(double level, double df, double expected) =>
        Relative.Equal(expected, Quantiles.TwoSidedStudent(level, df), 5e-11);

    /// <summary>Source: closed forms of the t distribution with one and two degrees of freedom (any textbook).</summary>
    [Fact]
    public void TwoSidedStudent_OneOrTwoDegrees_MatchesClosedForms() =>
        Gen.Double[0.01, 0.9999].Sample(level =>
        {
            Relative.Equal(Math.Tan(Math.PI * level / 2), Quantiles.TwoSidedStudent(level, 1), 1e-10);
            Relative.Equal(level * Math.Sqrt(2 / (1 - (level * level))), Quantiles.TwoSidedStudent(level, 2), 1e-10);
        });

    [Fact]
    public void TwoSidedStudent_WhereTheMethodChanges_IsContinuous() =>
        Gen.Double[0.1, 0.999999].Sample(level =>
            Relative.Equal(Quantiles.TwoSidedStudent(level, 10_000), Quantiles.TwoSidedStudent(level, 10_000.0001), 1e-10));

    [Fact]
    public void TwoSidedStudent_InfiniteDegrees_IsNormal() =>
        Assert.Equal(Quantiles.TwoSidedNormal(0.95), Quantiles.TwoSidedStudent(0.95, double.PositiveInfinity));

    [Fact]
    public void TwoSidedStudent_NoDegreesKnown_IsNaN() => Assert.Equal(double.NaN, Quantiles.TwoSidedStudent(0.95, double.NaN));

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    [InlineData(95)]
    [InlineData(double.NaN)]
    public void TwoSidedNormal_LevelOutsideTheUnitInterval_NamesTheLevel(double level)
    {
        Assert.Equal("level", Assert.Throws<ArgumentOutOfRangeException>(() => Quantiles.TwoSidedNormal(level)).ParamName);
        Assert.Equal("level", Assert.Throws<ArgumentOutOfRangeException>(() => Quantiles.TwoSidedStudent(level, 3)).ParamName);
    }

    [Theory]
    [InlineData(0)]
    [InlineData(-1)]
    public void TwoSidedStudent_NoDegrees_NamesThem(double df) =>
        Assert.Equal("df", Assert.Throws<ArgumentOutOfRangeException>(() => Quantiles.TwoSidedStudent(0.95, df)).ParamName);
}
