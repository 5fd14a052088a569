using System.Globalization;
using System.Numerics;
using System.Text;
using System.Text.Json.Nodes;
using CsCheck;
using Evenhand.Monitoring.Snapshots;
using Xunit;

namespace Evenhand.Monitoring.Tests.Snapshots;

public sealed class CanonicalNumberTests
{
    // RFC 8785, appendix B, all finite rows.
    [Theory]
    [InlineData(0x0000000000000000UL, "0")]
    [InlineData(0x8000000000000000UL, "0")]
    [InlineData(0x0000000000000001UL, "5e-324")]
    [InlineData(0x8000000000000001UL, "-5e-324")]
    [InlineData(0x7fefffffffffffffUL, "1.7976931348623157e+308")]
    [InlineData(0xffefffffffffffffUL, "-1.7976931348623157e+308")]
    [InlineData(0x4340000000000000UL, "9007199254740992")]
    [InlineData(0xc340000000000000UL, "-9007199254740992")]
    [InlineData(0x4430000000000000UL, "295147905179352830000")]
    [InlineData(0x44b52d02c7e14af5UL, "9.999999999999997e+22")]
    [InlineData(0x44b52d02c7e14af6UL, "1e+23")]
    [InlineData(0x44b52d02c7e14af7UL, "1.0000000000000001e+23")]
    [InlineData(0x444b1ae4d6e2ef4eUL, "999999999999999700000")]
    [InlineData(0x444b1ae4d6e2ef4fUL, "999999999999999900000")]
    [InlineData(0x444b1ae4d6e2ef50UL, "1e+21")]
    [InlineData(0x3eb0c6f7a0b5ed8cUL, "9.999999999999997e-7")]
    [InlineData(0x3eb0c6f7a0b5ed8dUL, "0.000001")]
    [InlineData(0x41b3de4355555553UL, "333333333.3333332")]
    [InlineData(0x41b3de4355555554UL, "333333333.33333325")]
    [InlineData(0x41b3de4355555555UL, "333333333.3333333")]
    [InlineData(0x41b3de4355555556UL, "333333333.3333334")]
    [InlineData(0x41b3de4355555557UL, "333333333.33333343")]
    [InlineData(0xbecbf647612f3696UL, "-0.0000033333333333333333")]
    [InlineData(0x43143ff3c1cb0959UL, "1424953923781206.2")]
    public void Format_RowsOfAppendixB_GivesTheirText(ulong bits, string expected) =>
        Assert.Equal(expected, Text(BitConverter.UInt64BitsToDouble(bits)));

    // RFC 8785, appendix B: NaN and Infinity are errors.
    [Theory]
    [InlineData(0x7fffffffffffffffUL)]
    [InlineData(0x7ff0000000000000UL)]
    public void Serialize_NotFinite_Refuses(ulong bits) =>
        Assert.Throws<CanonicalJsonException>(() => CanonicalJson.Serialize(JsonValue.Create(BitConverter.UInt64BitsToDouble(bits))));

    [Fact]
    public void Format_RandomBits_ReadsBackAsTheSameDouble() => AnyDouble.Sample(
        value => value == 0 || BitConverter.DoubleToInt64Bits(double.Parse(Text(value), CultureInfo.InvariantCulture)) == BitConverter.DoubleToInt64Bits(value),
        iter: 100_000);

    // The definition in ECMA-262, section 6.1.6.1.20, carried out in exact integers.
    [Fact]
    public void Format_RandomBits_AgreesWithTheDefinition() =>
        AnyDouble.Where(v => v != 0).Sample(value => Assert.Equal(Define(value), Text(value)), iter: 20_000);

    // At a power of two the doubles below lie closer than those above, where shortest-digit methods err most.
    [Fact]
    public void Format_EveryPowerOfTwo_AgreesWithTheDefinition()
    {
        for (var exponent = -1074; exponent <= 1023; exponent++)
        {
            var value = Math.ScaleB(1.0, exponent);
            Assert.Equal(Define(value), Text(value));
        }
    }

    private static readonly Gen<double> AnyDouble = Gen.OneOf(
        Gen.ULong.Select(BitConverter.UInt64BitsToDouble),
        Gen.Double[-1, 1],
        Gen.Int[-1_000_000, 1_000_000].Select(i => i / 1000.0),
        Gen.Select(Gen.Long, Gen.Int[-30, 30]).Select((m, e) => m * Math.Pow(10, e)))
        .Where(double.IsFinite);

    private static string Text(double value) => Encoding.UTF8.GetString(CanonicalJson.Serialize(JsonValue.Create(value)));

    // n, k and s of the definition: the fewest digits k such that s·10^(n-k) reads back as the value, of
    // those the s nearest to it, of two equally near the even one. Everything over one common denominator.
    private static string Define(double value)
    {
        var bits = BitConverter.DoubleToInt64Bits(Math.Abs(value));
        var biased = (int)(bits >> 52);
        BigInteger mantissa = biased == 0 ? bits : (bits & ((1L << 52) - 1)) | (1L << 52);
        var exponent = Math.Max(biased, 1) - 1075;
        var even = mantissa.IsEven;
        var closer = biased > 1 && (bits & ((1L << 52) - 1)) == 0;
        // Value and the two midpoints to its neighbours, in quarters of the last place.
        BigInteger middle = mantissa * 4, low = middle - (closer ? 1 : 2), high = middle + 2;
        var (up, down) = exponent >= 2 ? (BigInteger.One << (exponent - 2), BigInteger.One) : (BigInteger.One, BigInteger.One << (2 - exponent));
        for (var k = 1; ; k++)
        {
            var power = (int)Math.Floor(BigInteger.Log10(middle * up) - BigInteger.Log10(down)) + 1 - k;
            if (Nearest(power + 1) is { } above && above.ToString(CultureInfo.InvariantCulture).Length == k)
            {
                return Lay(above.ToString(CultureInfo.InvariantCulture), power + 1 + k, value < 0);
            }

            if (Nearest(power) is { } s && s.ToString(CultureInfo.InvariantCulture).Length == k)
            {
                return Lay(s.ToString(CultureInfo.InvariantCulture), power + k, value < 0);
            }
        }

        BigInteger? Nearest(int power)
        {
            var unit = BigInteger.Pow(10, Math.Abs(power));
            var (times, over) = power < 0 ? (unit * up, down) : (up, down * unit);
            var floor = BigInteger.Divide(middle * times, over);
            BigInteger? best = null;
            BigInteger bestDistance = 0;
            for (var s = floor; s <= floor + 1; s++)
            {
                BigInteger at = s * over, from = low * times, to = high * times, distance = BigInteger.Abs(at - (middle * times));
                var inside = even ? at >= from && at <= to : at > from && at < to;
                if (s > 0 && inside && (best is null || distance < bestDistance || (distance == bestDistance && s.IsEven)))
                {
                    (best, bestDistance) = (s, distance);
                }
            }

            return best;
        }
    }

    private static string Lay(string digits, int n, bool negative)
    {
        var k = digits.Length;
        var e = n - 1;
        var text = k <= n && n <= 21 ? digits + new string('0', n - k)
            : n is > 0 and <= 21 ? digits[..n] + "." + digits[n..]
            : n is > -6 and <= 0 ? "0." + new string('0', -n) + digits
            : digits[..1] + (k > 1 ? "." + digits[1..] : "") + "e" + (e < 0 ? "-" : "+") + Math.Abs(e).ToString(CultureInfo.InvariantCulture);
        return negative ? "-" + text : text;
    }
}
