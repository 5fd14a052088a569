using System.Reflection;
using System.Text.Json;
using System.Text.Json.Nodes;
using Evenhand.Monitoring.Charters;
using Evenhand.Testing;
using Xunit;

namespace Evenhand.Monitoring.Tests.Charters;

/// <summary>The shipped schema of charters and the parser know the same keys and take the same charters.</summary>
public sealed class CharterSchemaTests
{
    private static readonly ShippedSchema Schema = new(CharterSchema.Text);
    private static readonly JsonObject Definitions = JsonNode.Parse(CharterSchema.Text)!["$defs"]!.AsObject();

    public static TheoryData<string> Valid() => [.. Files("valid"), .. Files("open")];

    /// <summary>Charters that are wrong in what a schema can express: a key unknown, missing or given twice over.</summary>
    public static TheoryData<string> WrongInShape() => [.. Files("wrong").Where(f => ProblemsOf(f).Contains(" is no key here;", StringComparison.Ordinal))];

    public static TheoryData<string> Shapes() => [.. CharterShapes.All.Select(s => s.Name)];

    [Theory]
    [MemberData(nameof(Valid))]
    public void Charter_ThatTheParserTakes_IsValid(string file) => Assert.Equal("", Schema.Errors(Read(file)));

    [Theory]
    [MemberData(nameof(WrongInShape))]
    public void Charter_WithAKeyThatTheParserDoesNotKnow_IsNotValid(string file) => Assert.NotEqual("", Schema.Errors(Read(file)));

    [Theory]
    [MemberData(nameof(Shapes))]
    public void Shape_InTheParserAndInTheSchema_HasTheSameKeys(string name)
    {
        KeyShape shape = CharterShapes.All.Single(s => s.Name == name);
        JsonObject schema = SchemaOf(name);

        Assert.Equal(shape.Keys.Order(StringComparer.Ordinal), schema["properties"]!.AsObject().Select(p => p.Key).Order(StringComparer.Ordinal));
        Assert.Equal(shape.Keys.Distinct().Count(), shape.Keys.Length);

        // Free keys are described, all others refused.
        Assert.Equal(shape.TakesFreeKeys ? JsonValueKind.Object : JsonValueKind.False, schema["additionalProperties"]!.GetValueKind());
    }

    [Fact]
    public void Shapes_InTheParserAndInTheSchema_AreTheSame()
    {
        IEnumerable<string> described = Definitions.Where(d => d.Value!["properties"] is not null).Select(d => d.Key).Append("charter");
        Assert.Equal(described.Order(StringComparer.Ordinal), CharterShapes.All.Select(s => s.Name).Order(StringComparer.Ordinal));

        // A shape that somebody adds beside the list would go unchecked.
        IEnumerable<KeyShape> declared = typeof(CharterShapes).GetFields(BindingFlags.Static | BindingFlags.Public | BindingFlags.NonPublic)
            .Select(f => f.GetValue(null)).OfType<KeyShape>();
        Assert.Equal(declared.Where(s => s.Keys.Length > 0).Select(s => s.Name).Order(StringComparer.Ordinal), CharterShapes.All.Select(s => s.Name).Order(StringComparer.Ordinal));
    }

    [Theory]
    [MemberData(nameof(Shapes))]
    public void Key_InTheSchema_SaysWhatItMeans(string name)
    {
        IEnumerable<string> silent = SchemaOf(name)["properties"]!.AsObject().Where(p => string.IsNullOrWhiteSpace((string?)p.Value!["description"])).Select(p => p.Key);
        Assert.Empty(silent);
    }

    [Fact]
    public void Measures_InTheSchemaAndInTheCatalogue_AreTheSame()
    {
        IEnumerable<string> listed = Definitions["alert"]!["properties"]!["measure"]!["enum"]!.AsArray().Select(m => (string)m!);
        Assert.Equal(MeasureCatalogue.All.Select(m => m.Name).Order(StringComparer.Ordinal), listed.Order(StringComparer.Ordinal));
    }

    private static JsonObject SchemaOf(string shape) => (shape == "charter" ? JsonNode.Parse(CharterSchema.Text)! : Definitions[shape]!).AsObject();

    private static JsonNode? Read(string file) => YamlAsJson.Read(File.ReadAllText(TestData.Path(file)));

    private static string ProblemsOf(string file) => File.ReadAllText(TestData.Path(Path.ChangeExtension(file, ".txt")));

    private static IEnumerable<string> Files(string folder) =>
        Directory.EnumerateFiles(TestData.Path($"charters/{folder}"), "*.yaml").Select(f => $"charters/{folder}/{Path.GetFileName(f)}").Order(StringComparer.Ordinal);
}
