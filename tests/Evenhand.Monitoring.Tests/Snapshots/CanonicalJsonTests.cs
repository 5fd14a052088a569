using System.Text;
using System.Text.Json.Nodes;
using CsCheck;
using Evenhand.Monitoring.Snapshots;
using Xunit;

namespace Evenhand.Monitoring.Tests.Snapshots;

public sealed class CanonicalJsonTests
{
    // RFC 8785, section 3.2.2 (input) and 3.2.4 (the canonical bytes, there given in hexadecimal).
    private const string PrimitivesInput =
        """
        {
          "numbers": [333333333.33333329, 1E30, 4.50, 2e-3, 0.000000000000000000000000001],
          "string": "\u20ac$\u000F\u000aA'\u0042\u0022\u005c\\\"\/",
          "literals": [null, true, false]
        }
        """;

    private const string Primitives =
        """{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\u000f\nA'B\"\\\\\"/"}""";

    [Fact]
    public void Canonicalize_PrimitivesOfTheRfc_GivesItsBytes() => Assert.Equal(Primitives, Canonical(PrimitivesInput));

    // RFC 8785, section 3.2.3.
    [Fact]
    public void Canonicalize_SortingExampleOfTheRfc_GivesItsOrder()
    {
        const string input =
            """
            {"\u20ac": "Euro Sign", "\r": "Carriage Return", "\ufb33": "Hebrew Letter Dalet With Dagesh", "1": "One",
             "\ud83d\ude00": "Emoji: Grinning Face", "\u0080": "Control", "\u00f6": "Latin Small Letter O With Diaeresis"}
            """;
        string[] expected =
        [
            "Carriage Return", "One", "Control", "Latin Small Letter O With Diaeresis", "Euro Sign",
            "Emoji: Grinning Face", "Hebrew Letter Dalet With Dagesh",
        ];

        var ordered = JsonNode.Parse(Canonical(input))!.AsObject().Select(m => m.Value!.GetValue<string>());

        Assert.Equal(expected, ordered);
    }

    [Fact]
    public void Serialize_RandomNames_SortsAsUtf16() => Gen.String.Where(IsWhole).Array[0, 12].Sample(names =>
    {
        var node = new JsonObject(names.Distinct().Select(n => KeyValuePair.Create(n, (JsonNode?)1)));
        var written = JsonNode.Parse(CanonicalJson.Serialize(node))!.AsObject().Select(m => m.Key);
        Assert.Equal(names.Distinct().Order(StringComparer.Ordinal), written);
    });

    [Theory]
    [InlineData("a\uFB33", "a\U0001F600")]
    [InlineData("\uE000", "\U0010FFFF")]
    [InlineData("ab", "a")]
    public void CompareNames_AcrossPlanes_AgreesWithUtf16(string left, string right) => Assert.Equal(
        Math.Sign(string.CompareOrdinal(left, right)),
        Math.Sign(CanonicalJsonWriter.CompareNames(Encoding.UTF8.GetBytes(left), Encoding.UTF8.GetBytes(right))));

    [Fact]
    public void Canonicalize_RandomDocument_IsIdempotentAndAgreesWithTheTree() => Documents.Sample(node =>
    {
        var spaced = node!.ToJsonString(new() { WriteIndented = true });
        var bytes = CanonicalJson.Canonicalize(Encoding.UTF8.GetBytes(spaced));

        Assert.Equal(bytes, CanonicalJson.Canonicalize(bytes));
        Assert.Equal(bytes, CanonicalJson.Serialize(node));
        Assert.True(CanonicalJson.IsCanonical(bytes));
        Assert.True(JsonNode.DeepEquals(JsonNode.Parse(spaced), JsonNode.Parse(bytes)));
    });

    [Theory]
    [InlineData("", "At byte 0")]
    [InlineData("{\"a\":1,\"a\":2}", "'a' occurs more than once")]
    [InlineData("{\"b\":{\"a\":1,\"c\":0,\"\\u0061\":2}}", "At byte 5: the name 'a' occurs more than once")]
    [InlineData("[1] 2", "At byte 4: something after the end")]
    [InlineData("[NaN]", "At byte 1")]
    [InlineData("[-Infinity]", "At byte 1")]
    [InlineData("[1e999]", "At byte 1: a number beyond the range")]
    [InlineData("[01]", "At byte 2")]
    [InlineData("[1.]", "At byte 1: not a JSON number")]
    [InlineData("[+1]", "At byte 1")]
    [InlineData("[1,]", "At byte 3")]
    [InlineData("{\"a\":1,}", "At byte 7")]
    [InlineData("{a:1}", "At byte 1")]
    [InlineData("['a']", "At byte 1")]
    [InlineData("[\"\\ud800\"]", "At byte 2: half of a surrogate pair")]
    [InlineData("[\"\\udc00\\ud800\"]", "At byte 2: half of a surrogate pair")]
    [InlineData("[\"\\ud800\\u0041\"]", "At byte 2: half of a surrogate pair")]
    [InlineData("[\"\\x\"]", "At byte 2: an unknown escape")]
    [InlineData("[\"\\u12g4\"]", "At byte 2")]
    [InlineData("[\"a", "inside a string")]
    [InlineData("[\"a\nb\"]", "At byte 3: a control character")]
    [InlineData("[1", "the end, where more must follow")]
    [InlineData("\uFEFF[]", "a byte order mark")]
    [InlineData("[tru]", "At byte 1")]
    public void Canonicalize_NoIJson_SaysWhere(string json, string message)
    {
        var bytes = Encoding.UTF8.GetBytes(json);
        var refused = Assert.Throws<CanonicalJsonException>(() => CanonicalJson.Canonicalize(bytes));
        Assert.Contains(message, refused.Message, StringComparison.Ordinal);
        Assert.False(CanonicalJson.IsCanonical(bytes));
    }

    [Theory]
    [InlineData(new byte[] { 0x22, 0xFF, 0x22 }, "At byte 1")]
    [InlineData(new byte[] { 0x22, 0x61, 0xED, 0xA0, 0x80, 0x22 }, "At byte 2")]
    [InlineData(new byte[] { 0x22, 0xC0, 0x80, 0x22 }, "At byte 1")]
    [InlineData(new byte[] { 0x22, 0xE2, 0x82 }, "At byte 1")]
    public void Canonicalize_InvalidUtf8_SaysWhere(byte[] json, string message) => Assert.StartsWith(
        message + ": invalid UTF-8", Assert.Throws<CanonicalJsonException>(() => CanonicalJson.Canonicalize(json)).Message, StringComparison.Ordinal);

    [Theory]
    [InlineData("{\"b\":1,\"a\":2}")]
    [InlineData("[1, 2]")]
    [InlineData("[1.0]")]
    [InlineData("[-0]")]
    [InlineData("[1E5]")]
    [InlineData("[\"\\u0041\"]")]
    [InlineData("[\"\\/\"]")]
    [InlineData("[9007199254740993]")]
    [InlineData("[]\n")]
    [InlineData("[]\r")]
    public void IsCanonical_SameValueWrittenOtherwise_IsFalse(string json) => Assert.False(CanonicalJson.IsCanonical(Encoding.UTF8.GetBytes(json)));

    [Fact]
    public void Serialize_EveryKindOfValue_WritesIt()
    {
        var node = new JsonObject
        {
            ["long"] = 9007199254740992L, ["int"] = -3, ["double"] = 1e21, ["decimal"] = 0.10m, ["text"] = "a\u001f\u2028/",
            ["yes"] = true, ["none"] = null, ["empty"] = new JsonArray(), ["parsed"] = JsonNode.Parse("[1.50,\"\\u00e9\"]"),
            ["zero"] = -0.0, ["object"] = new JsonObject(),
        };

        Assert.Equal(
            """{"decimal":0.1,"double":1e+21,"empty":[],"int":-3,"long":9007199254740992,"none":null,"object":{},"parsed":[1.5,"é"],"text":"a\u001f""" + "\u2028/\",\"yes\":true,\"zero\":0}",
            Encoding.UTF8.GetString(CanonicalJson.Serialize(node)));
    }

    public static TheoryData<Func<JsonNode>, string> Refused => new()
    {
        { () => JsonValue.Create(double.NaN), "$.a[1]: NaN" },
        { () => JsonValue.Create(double.NegativeInfinity), "$.a[1]: NaN and infinities" },
        { () => JsonValue.Create(9007199254740993L), "$.a[1]: an integer beyond 2^53" },
        { () => JsonValue.Create(long.MinValue), "$.a[1]: an integer beyond 2^53" },
        { () => JsonValue.Create(9007199254740993m), "$.a[1]: an integer beyond 2^53" },
        { () => JsonValue.Create("\ud800"), "$.a[1]: half of a surrogate" },
        { () => new JsonObject { ["\udc00"] = 1 }, "$.a[1]: half of a surrogate" },
        { () => JsonNode.Parse("{\"x\":1,\"x\":2}")!, "$.a[1]" },
    };

    [Theory]
    [MemberData(nameof(Refused))]
    public void Serialize_ValueWithoutCanonicalForm_GivesItsPath(Func<JsonNode> value, string message)
    {
        ArgumentNullException.ThrowIfNull(value);
        var node = new JsonObject { ["a"] = new JsonArray(0, value()) };
        Assert.Contains(message, Assert.Throws<CanonicalJsonException>(() => CanonicalJson.Serialize(node)).Message, StringComparison.Ordinal);
    }

    [Fact]
    public void Canonicalize_Nesting_EndsAtTheLimit()
    {
        static string Nested(int depth) => new string('[', depth) + new string(']', depth);

        Assert.Equal(Nested(128), Canonical(Nested(128)));
        Assert.Contains("At byte 128: nested more", Assert.Throws<CanonicalJsonException>(() => Canonical(Nested(129))).Message, StringComparison.Ordinal);
        Assert.Throws<CanonicalJsonException>(() => Canonical(new string('[', 1_000_000)));
    }

    [Theory]
    [InlineData(9007199254740992, "9007199254740992")]
    [InlineData(-9007199254740992, "-9007199254740992")]
    [InlineData(9007199254740993, "\"9007199254740993\"")]
    [InlineData(long.MinValue, "\"-9223372036854775808\"")]
    public void Integer_OnEitherSideOfTheSafeRange_IsNumberOrString(long value, string expected) =>
        Assert.Equal(expected, Encoding.UTF8.GetString(CanonicalJson.Serialize(CanonicalJson.Integer(value))));

    private static bool IsWhole(string text) => !text.EnumerateRunes().Any(r => r == Rune.ReplacementChar);

    private static string Canonical(string json) => Encoding.UTF8.GetString(CanonicalJson.Canonicalize(Encoding.UTF8.GetBytes(json)));

    private static readonly Gen<JsonNode?> Documents = Gen.Recursive<JsonNode?>((depth, inner) =>
    {
        var leaf = Gen.OneOf(
            Gen.Double.Where(double.IsFinite).Select(d => (JsonNode?)JsonValue.Create(d)),
            Gen.Int.Select(i => (JsonNode?)JsonValue.Create(i)),
            Gen.String.Where(IsWhole).Select(s => (JsonNode?)JsonValue.Create(s)),
            Gen.Bool.Select(b => (JsonNode?)JsonValue.Create(b)));
        if (depth > 3)
        {
            return leaf;
        }

        var array = inner.Array[0, 4].Select(items => (JsonNode?)new JsonArray(items));
        var members = Gen.Select(Gen.String.Where(IsWhole), inner).Array[0, 6].Select(pairs =>
            (JsonNode?)new JsonObject(pairs.DistinctBy(p => p.Item1).Select(p => KeyValuePair.Create(p.Item1, p.Item2))));
        return Gen.OneOf(leaf, array, members);
    }).Where(n => n is not null);
}
