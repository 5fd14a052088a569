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

    // The definition of ECMAScript's Number::toString: the fewest digits k such that s·10^(n-k) reads back as the value, of
    // those the s nearest to it. The runtime's "E" format rounds correctly to any number of digits and its parser is exact, so
    // the k-digit decimal nearest to the value is tried first, then its neighbours: at powers of two the doubles below lie closer,
    // and the nearest decimal may fall to the double below while the next one up does not.
    private static string Define(double value)
    {
        if (value == 0)
        {
            return "0";
        }

        for (var k = 1; k <= 17; k++)
        {
            var text = Math.Abs(value).ToString($"E{k - 1}", CultureInfo.InvariantCulture);
            var mark = text.IndexOf('E', StringComparison.Ordinal);
            var s = BigInteger.Parse(text[..mark].Replace(".", "", StringComparison.Ordinal), CultureInfo.InvariantCulture);
            var n = int.Parse(text[(mark + 1)..], CultureInfo.InvariantCulture) + 1;
            foreach (var near in (BigInteger[])[s, s + 1, s - 1])
            {
                var digits = near.ToString(CultureInfo.InvariantCulture);
                if (digits.Length == k && double.Parse($"{digits}E{n - k}", CultureInfo.InvariantCulture) == Math.Abs(value))
                {
                    return Lay(digits, n, value < 0);
                }
            }
        }

        throw new InvalidOperationException($"17 digits always suffice, but not for {value:R}");
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
