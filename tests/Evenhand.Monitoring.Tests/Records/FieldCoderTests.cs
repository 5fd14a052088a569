using System.Globalization;
using System.Text;
using CsCheck;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;
using Xunit;

namespace Evenhand.Monitoring.Tests.Records;

public sealed class FieldCoderTests
{
    private static readonly FieldPath At = new(["/x"]);

    // Listed: river 0, hill 1, "1" 2, a text longer than a machine word 3; missing 4, unlisted 5, declined 6.
    private static readonly CodedField Listed = new()
    {
        Name = "language",
        At = At,
        Values = ["river", "hill", "1", "upper harbour"],
        Missing = ["unknown"],
        Declined = ["not_stated"],
    };

    // Bands: below −1.5 unlisted, −1.5..0 0, 0..2000 1, 2000.. 2; missing 3, unlisted 4, declined 5.
    private static readonly CodedField Banded = new() { Name = "damage", At = At, Bands = [-1.5, 0, 2000], Missing = ["-9", "n/a"], Declined = ["-8"] };

    [Theory]
    [InlineData("river", 0)]
    [InlineData("hill", 1)]
    [InlineData("1", 2)]
    [InlineData("upper harbour", 3)]
    [InlineData("", 4)]
    [InlineData("unknown", 4)]
    [InlineData("River", 5)]
    [InlineData("river ", 5)]
    [InlineData("riverr", 5)]
    [InlineData("1.0", 5)]
    [InlineData("upper harbou", 5)]
    [InlineData("upper harbouR", 5)]
    [InlineData("\0", 5)]
    [InlineData("hill\0", 5)]
    [InlineData("not_stated", 6)]
    public void Code_ListedField_ComparesExactly(string text, int code) =>
        Assert.Equal(code, new FieldCoder(Listed).Code(Encoding.UTF8.GetBytes(text)));

    [Theory]
    [InlineData("-1.5", 0)]
    [InlineData("-0.0", 1)]
    [InlineData("-1e-400", 1)]
    [InlineData("0", 1)]
    [InlineData("1999.9999999999998", 1)]
    [InlineData("1999.99999999999999999", 2)]
    [InlineData("2e3", 2)]
    [InlineData("2000", 2)]
    [InlineData("1e308", 2)]
    [InlineData("", 3)]
    [InlineData("n/a", 3)]
    [InlineData("-9", 3)]
    [InlineData("-9.0", 4)]
    [InlineData("-8", 5)]
    [InlineData("-1.5000001", 4)]
    [InlineData("NaN", 4)]
    [InlineData("nan", 4)]
    [InlineData("Infinity", 4)]
    [InlineData("-Infinity", 4)]
    [InlineData("∞", 4)]
    [InlineData("1e999", 4)]
    [InlineData("1,5", 4)]
    [InlineData("1 500", 4)]
    [InlineData(" 5", 4)]
    [InlineData("5 ", 4)]
    [InlineData("5\0", 4)]
    [InlineData("5e1\0", 4)]
    [InlineData("0x5", 4)]
    [InlineData("5%", 4)]
    [InlineData("(5)", 4)]
    [InlineData("$5", 4)]
    [InlineData("--5", 4)]
    [InlineData("-", 4)]
    [InlineData(".", 4)]
    [InlineData("1.2.3", 4)]
    [InlineData("many", 4)]
    [InlineData("true", 4)]
    public void Code_BandedField_SortsNumbersIntoBands(string text, int code) =>
        Assert.Equal(code, new FieldCoder(Banded).Code(Encoding.UTF8.GetBytes(text)));

    [Fact]
    public void Code_QuantilesWithoutCutPoints_SaysPresentOnly()
    {
        FieldCoder coder = new(new CodedField { Name = "income", At = At, Quantiles = 12 });
        Assert.Equal([0, 0, 2, 2, 1], ((string[])["5", "-1e9", "NaN", "much", ""]).Select(t => (int)coder.Code(Encoding.UTF8.GetBytes(t))));
    }

    [Fact]
    public void Code_ManyValues_EachHasItsOwn()
    {
        string[] values = [.. Enumerable.Range(0, 500).Select(i => $"place number {i}")];
        FieldCoder coder = new(new CodedField { Name = "place", At = At, Values = values });
        Assert.All(Enumerable.Range(0, 500), i => Assert.Equal(i, coder.Code(Encoding.UTF8.GetBytes(values[i]))));
        Assert.Equal(501, coder.Code("place number 500"u8));
    }

    /// <summary>Against a search through the list of cuts and the platform's own reading of numbers.</summary>
    [Fact]
    public void Code_AnyNumber_FallsIntoTheBandThatHoldsIt() =>
        Gen.Select(Gen.Double[-1e6, 1e6].Array[1, 20], Gen.Double[-1e6, 1e6]).Sample((cuts, value) =>
        {
            double[] bands = [.. cuts.Distinct().Order()];
            CodedField field = new() { Name = "x", At = At, Bands = bands };
            double at = value < 0 ? bands[(int)-value % bands.Length] : value;
            int below = bands.Count(cut => cut <= at);
            string text = at.ToString("R", CultureInfo.InvariantCulture);
            Assert.Equal(below == 0 ? field.UnlistedCode : below - 1, new FieldCoder(field).Code(Encoding.UTF8.GetBytes(text)));
        });

    /// <summary>Against the platform's own reader, which rounds correctly.</summary>
    [Fact]
    public void NumberParser_PlainDecimals_GivesTheNearestDouble() =>
        Gen.Select(Gen.Long[0, 99_999_999_999_999_999], Gen.Int[0, 17], Gen.Bool).Sample((digits, point, negative) =>
        {
            string all = digits.ToString("D18", CultureInfo.InvariantCulture);
            string text = (negative ? "-" : "") + all[..^point].TrimStart('0').PadLeft(1, '0') + "." + all[^point..] + (point == 0 ? "0" : "");
            Assert.True(NumberParser.TryParse(Encoding.UTF8.GetBytes(text), out double value), text);
            Assert.Equal(BitConverter.DoubleToInt64Bits(double.Parse(text, CultureInfo.InvariantCulture)), BitConverter.DoubleToInt64Bits(value));
        });
}
