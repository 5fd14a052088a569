using System.Numerics;

namespace Evenhand.Statistics.Tests.HypothesisTests;

/// <summary>Whole-number arithmetic for brute-force checks.</summary>
internal static class Binomials
{
    private static readonly Lock _gate = new();
    private static readonly List<BigInteger> _factorials = [BigInteger.One];

    public static BigInteger Coefficient(long n, long k) => Factorial(n) / (Factorial(k) * Factorial(n - k));

    /// <summary>The quotient to full double precision, also where both parts exceed every double.</summary>
    public static double Quotient(BigInteger numerator, BigInteger denominator)
    {
        if (numerator.IsZero)
        {
            return 0;
        }

        int shift = (int)(denominator.GetBitLength() - numerator.GetBitLength()) + 70;
        BigInteger scaled = shift >= 0 ? (numerator << shift) / denominator : numerator / (denominator << -shift);
        return Math.ScaleB((double)scaled, -shift);
    }

    private static BigInteger Factorial(long n)
    {
        lock (_gate)
        {
            while (_factorials.Count <= n)
            {
                _factorials.Add(_factorials[^1] * _factorials.Count);
            }

            return _factorials[(int)n];
        }
    }
}
