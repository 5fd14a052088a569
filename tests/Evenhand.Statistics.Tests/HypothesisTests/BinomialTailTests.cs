using System.Numerics;
using CsCheck;
using Evenhand.Statistics.HypothesisTests;

namespace Evenhand.Statistics.Tests.HypothesisTests;

public sealed class BinomialTailTests
{
    private const int Parts = 64;

    /// <summary>Source: sums in whole numbers; sixty-fourths are exact in binary.</summary>
    [Fact]
    public void LowerAndUpper_SmallCounts_MatchEnumeration() =>
        (from c in Counts.OneGroup(80) from part in Gen.Int[0, Parts] select (c.X, c.N, part)).Sample(((long X, long N, int Part) s) =>
        {
            double p = (double)s.Part / Parts;
            Close(Enumerated(0, s.X, s.N, s.Part), BinomialTail.Lower(s.X, s.N, p));
            Close(Enumerated(s.X, s.N, s.N, s.Part), BinomialTail.Upper(s.X, s.N, p));
        });

    /// <summary>Source: the same sums at 50 digits (mpmath 1.2.1).</summary>
    [Theory]
    [InlineData(0, 1_000_000, 1e-4, 3.7015207857525986e-44)]
    [InlineData(50, 1_000_000, 1e-4, 2.3985360747521684e-8)]
    [InlineData(0, 1_000_000_000, 1e-7, 3.7200573756862335e-44)]
    [InlineData(339, 870, 0.791, 4.1806077554205978e-145)]
    public void Lower_LargeCountsFarOut_MatchesHighPrecision(long x, long n, double p, double expected) =>
        Relative.Equal(expected, BinomialTail.Lower(x, n, p), 1e-11);

    /// <summary>Source: the same sums at 50 digits (mpmath 1.2.1).</summary>
    [Theory]
    [InlineData(502_000, 1_000_000, 0.5, 3.1804668750412443e-5)]
    [InlineData(10, 1_000_000_000, 1e-9, 1.1142547428361232e-7)]
    public void Upper_LargeCountsFarOut_MatchesHighPrecision(long x, long n, double p, double expected) =>
        Relative.Equal(expected, BinomialTail.Upper(x, n, p), 1e-11);

    [Fact]
    public void LowerAndUpper_LargeCounts_ShareTheObservedCount() =>
        (from c in Counts.OneGroup(1_000_000) from p in Gen.Double[0.001, 0.999] where c.X < c.N select (c.X, c.N, p)).Sample(
            ((long X, long N, double P) s) =>
                Assert.Equal(1, BinomialTail.Lower(s.X, s.N, s.P) + BinomialTail.Upper(s.X + 1, s.N, s.P), 1e-11));

    [Fact]
    public void Lower_EdgesOfTheParameters_AreCertain()
    {
        Assert.Equal(1, BinomialTail.Lower(0, 0, 0.3));
        Assert.Equal(1, BinomialTail.Lower(0, 5, 0));
        Assert.Equal(0, BinomialTail.Lower(4, 5, 1));
        Assert.Equal(1, BinomialTail.Upper(5, 5, 1));
        Assert.Equal(0, BinomialTail.Upper(1, 5, 0));
        Assert.Equal(double.NaN, BinomialTail.Upper(1, 5, double.NaN));
    }

    private static double Enumerated(long from, long to, long n, int part)
    {
        BigInteger sum = 0;
        for (long x = from; x <= to; x++)
        {
            sum += Binomials.Coefficient(n, x) * BigInteger.Pow(part, (int)x) * BigInteger.Pow(Parts - part, (int)(n - x));
        }

        return Binomials.Quotient(sum, BigInteger.Pow(Parts, (int)n));
    }

    // The complement is taken past the mode, where the tail is at least about a half.
    private static void Close(double expected, double got) => Relative.Equal(expected, got, 1e-12);
}
