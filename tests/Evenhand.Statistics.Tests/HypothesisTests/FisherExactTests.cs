using System.Numerics;
using CsCheck;
using Evenhand.Statistics.HypothesisTests;

namespace Evenhand.Statistics.Tests.HypothesisTests;

public sealed class FisherExactTests
{
    /// <summary>Source: enumeration of all tables with the same margins in whole numbers.</summary>
    [Fact]
    public void TwoSided_SmallTables_MatchesEnumeration() =>
        Gen.Long[0, 40].Array[4].Sample(t =>
            Relative.Equal(Enumerated(t[0], t[1], t[2], t[3]), FisherExact.TwoSided(t[0], t[1], t[2], t[3]), 1e-12));

    /// <summary>Source: enumeration in whole numbers, thousands of tables of which most are nearly impossible.</summary>
    [Theory]
    [InlineData(900, 100, 300, 700)]
    [InlineData(3, 1997, 40, 960)]
    [InlineData(500, 500, 500, 501)]
    public void TwoSided_LargerTables_MatchesEnumeration(long a, long b, long c, long d) =>
        Relative.Equal(Enumerated(a, b, c, d), FisherExact.TwoSided(a, b, c, d), 1e-11);

    /// <summary>Source: log gamma functions and the same sums at 50 digits (mpmath 1.2.1).</summary>
    [Theory]
    [InlineData(3099, 12121, 954, 10749, 1.5053383108326796e-179)]
    [InlineData(500_000, 500_000, 498_000, 502_000, 0.0046983483070994662)]
    [InlineData(500_000, 500_000, 480_000, 520_000, 4.6585525811691783e-176)]
    [InlineData(300, 999_700, 200, 999_800, 8.9171581410670946e-6)]
    [InlineData(600_000, 400_000, 1200, 1000, 2.3706056177738882e-7)]
    [InlineData(2000, 998_000, 5, 4995, 0.14881446924865956)]
    [InlineData(100_000_000, 100_000_000, 100_050_000, 99_950_000, 5.7360002281792688e-7)]
    public void TwoSided_LargeTables_MatchesHighPrecision(long a, long b, long c, long d, double expected) =>
        Relative.Equal(expected, FisherExact.TwoSided(a, b, c, d), 1e-10);

    [Fact]
    public void TwoSided_TableTurnedOrMirrored_StaysTheSame() =>
        Gen.Long[0, 100_000].Array[4].Sample(t =>
        {
            double p = FisherExact.TwoSided(t[0], t[1], t[2], t[3]);
            Relative.Equal(p, FisherExact.TwoSided(t[2], t[3], t[0], t[1]), 1e-9);
            Relative.Equal(p, FisherExact.TwoSided(t[1], t[0], t[3], t[2]), 1e-9);
            Relative.Equal(p, FisherExact.TwoSided(t[0], t[2], t[1], t[3]), 1e-9);
        });

    [Theory]
    [InlineData(0, 0, 0, 0)]
    [InlineData(0, 0, 3, 4)]
    [InlineData(0, 5, 0, 4)]
    [InlineData(5, 0, 4, 0)]
    public void TwoSided_AnEmptyMargin_IsOne(long a, long b, long c, long d) => Assert.Equal(1, FisherExact.TwoSided(a, b, c, d));

    private static double Enumerated(long a, long b, long c, long d)
    {
        long n1 = a + b;
        long n2 = c + d;
        long events = a + c;
        BigInteger observed = Binomials.Coefficient(n1, a) * Binomials.Coefficient(n2, c);
        BigInteger limit = observed * 10_000_001;
        BigInteger sum = 0;
        BigInteger all = 0;
        for (long x = Math.Max(0, events - n2); x <= Math.Min(n1, events); x++)
        {
            BigInteger ways = Binomials.Coefficient(n1, x) * Binomials.Coefficient(n2, events - x);
            all += ways;
            sum += ways * 10_000_000 <= limit ? ways : 0;
        }

        return Binomials.Quotient(sum, all);
    }
}
