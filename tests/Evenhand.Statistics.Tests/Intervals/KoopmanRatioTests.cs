using CsCheck;
using Evenhand.Statistics.Distributions;
using Evenhand.Statistics.Intervals;
using Evenhand.Testing;

namespace Evenhand.Statistics.Tests.Intervals;

public sealed class KoopmanRatioTests
{
    /// <summary>
    /// Source: Koopman (1984). The statistic is computed here in his chi-square form, and the rate under the
    /// hypothesis by maximizing the likelihood numerically, so that nothing is shared with the code under test.
    /// </summary>
    [Fact]
    public void Of_AnyCounts_EndsSatisfyTheScoreEquation() =>
        Counts.TwoGroups(5000).Select(Counts.Level).Sample(
            ((long X1, long N1, long X2, long N2) c, double level) =>
            {
                double target = Math.Pow(Quantiles.TwoSidedNormal(level), 2);
                Interval interval = KoopmanRatio.Of(c.X1, c.N1, c.X2, c.N2, level);
                if (c.X1 > 0)
                {
                    Relative.Equal(target, ChiSquare(c.X1, c.N1, c.X2, c.N2, interval.Low), 1e-6);
                }

                if (c.X2 > 0)
                {
                    Relative.Equal(target, ChiSquare(c.X1, c.N1, c.X2, c.N2, interval.High), 1e-6);
                }

                double ratio = (double)c.X1 / c.N1 / ((double)c.X2 / c.N2);
                Assert.True(double.IsNaN(ratio) || (interval.Low <= ratio && ratio <= interval.High));
            },
            iter: 200);

    [Fact]
    public void Of_GroupsExchanged_Inverts() =>
        Counts.TwoGroups(1_000_000).Select(Counts.Level).Sample(((long X1, long N1, long X2, long N2) c, double level) =>
        {
            Interval there = KoopmanRatio.Of(c.X1, c.N1, c.X2, c.N2, level);
            Interval back = KoopmanRatio.Of(c.X2, c.N2, c.X1, c.N1, level);
            Relative.Equal(1 / there.High, back.Low, 1e-8);
            Relative.Equal(1 / there.Low, back.High, 1e-8);
        });

    /// <summary>
    /// The cases' score_ratio multiplies the variance by N/(N − 1), as Miettinen and Nurminen (Comparative analysis of
    /// two rates, Statistics in Medicine 4, 1985) do and Koopman does not. That is the same as a critical value larger
    /// by √(N/(N − 1)), so the cases are met at the level that has this critical value.
    /// </summary>
    [Fact]
    public void Of_ReferenceCasesAtTheLevelThatMakesUpForTheirFactor_Agree()
    {
        CaseComparison comparison = new();
        foreach (ReferenceCase c in ReferenceCases.Load("two_group").Where(c => c.TryExpected("score_ratio", out _)))
        {
            long n1 = c.Count("n1");
            long n2 = c.Count("n2");
            double z = Quantiles.TwoSidedNormal(c.Input.GetProperty("conf").GetDouble());
            double level = 1 - Tails.TwoSidedNormalTail(z * Math.Sqrt((double)(n1 + n2) / (n1 + n2 - 1)));
            Interval interval = KoopmanRatio.Of(c.Count("x1"), n1, c.Count("x2"), n2, level);
            comparison.Ends(c, "score_ratio", interval.Low, interval.High);
        }

        Assert.True(comparison.Differences.Length == 0, comparison.Differences);
        Assert.Equal(7 * 2, comparison.Compared);
    }

    /// <summary>Source: the score equation solved at 60 digits (mpmath 1.2.1); rates so near 0 or 1 that the plain quadratic cancels.</summary>
    [Theory]
    [InlineData(999_999_999, 1_000_000_000, 999_999_997, 1_000_000_000, 0.99999999708957864, 1.0000000079248595, 2e-15)]
    [InlineData(999, 1000, 999_999_999, 1_000_000_000, 0.99435744239639938, 0.99982345462920134, 2e-15)]
    [InlineData(999_999_999, 1_000_000_000, 999, 1000, 1.0001765765445702, 1.0056745767296739, 2e-15)]
    [InlineData(1, 1_000_000_000, 3, 1_000_000, 4.7764757892624667e-5, 0.0023262164466501711, 1e-13)]
    public void Of_ExtremeRates_MatchesHighPrecision(long x1, long n1, long x2, long n2, double low, double high, double tolerance)
    {
        Interval interval = KoopmanRatio.Of(x1, n1, x2, n2, 0.95);
        Relative.Equal(low, interval.Low, tolerance);
        Relative.Equal(high, interval.High, tolerance);
    }

    /// <summary>Source: closed form; with the second rate fitted at 1 the test is that of one proportion, which Wilson inverts.</summary>
    [Theory]
    [InlineData(1, 1)]
    [InlineData(10, 20)]
    [InlineData(100_000, 7)]
    public void Of_AllSuccessesInBoth_IsAnIntervalAboutOne(long n1, long n2)
    {
        double square = Math.Pow(Quantiles.TwoSidedNormal(0.95), 2);
        Interval interval = KoopmanRatio.Of(n1, n1, n2, n2, 0.95);
        Relative.Equal(n1 / (n1 + square), interval.Low, 1e-12);
        Relative.Equal((n2 + square) / n2, interval.High, 1e-12);
    }

    [Fact]
    public void Of_ZeroCells_KeepsTheEndTheyDoNotTouch()
    {
        Interval none = KoopmanRatio.Of(0, 10, 5, 10, 0.95);
        Assert.Equal(0, none.Low);
        Assert.InRange(none.High, 0.1, 1);
        Interval against = KoopmanRatio.Of(5, 10, 0, 10, 0.95);
        Assert.Equal(double.PositiveInfinity, against.High);
        Relative.Equal(1 / none.High, against.Low, 1e-12);
        Assert.Equal(new Interval(0, double.PositiveInfinity), KoopmanRatio.Of(0, 10, 0, 10, 0.95));
        Assert.Equal(Interval.Undefined, KoopmanRatio.Of(0, 0, 5, 10, 0.95));
        Assert.Equal(Interval.Undefined, KoopmanRatio.Of(5, 10, 0, 0, 0.95));
    }

    private static double ChiSquare(long x1, long n1, long x2, long n2, double ratio)
    {
        double p2 = MostLikelySecondRate(x1, n1, x2, n2, ratio);
        double p1 = ratio * p2;
        double first = x1 - (n1 * p1);
        double second = x2 - (n2 * p2);
        return Part(first, n1 * p1 * (1 - p1)) + Part(second, n2 * p2 * (1 - p2));
    }

    // A group whose fitted rate is 1 and met exactly adds nothing.
    private static double Part(double distance, double variance) => distance == 0 ? 0 : distance * distance / variance;

    // Bisection on the derivative of the log likelihood, which falls with the rate.
    private static double MostLikelySecondRate(long x1, long n1, long x2, long n2, double ratio)
    {
        double low = 0;
        double high = Math.Min(1, 1 / ratio);
        for (int i = 0; i < 200; i++)
        {
            double p = (low + high) / 2;
            double slope = ((x1 + x2) / p) - ((n1 - x1) * ratio / (1 - (ratio * p))) - ((n2 - x2) / (1 - p));
            (low, high) = slope > 0 ? (p, high) : (low, p);
        }

        return (low + high) / 2;
    }
}
