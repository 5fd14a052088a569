using System.Text.Json;
using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Files;

/// <summary>Reads a circuit file, <c>evenhand-circuit/1</c>; the format is described in <c>circuit-format.md</c>.</summary>
public static class CircuitReader
{
    /// <summary>The format's name and version.</summary>
    public const string Format = "evenhand-circuit/1";

    private static readonly string[] Keys = ["format", "variables", "nodes", "root", "profile_circuit", "learned"];

    /// <summary>Reads a circuit.</summary>
    /// <param name="json">The file, in UTF-8.</param>
    /// <param name="limit">Most nodes and edges together.</param>
    /// <exception cref="CircuitException">Not such a file, or not a circuit: one line with the node and the reason.</exception>
    public static Circuit Read(Stream json, long limit = CircuitBuilder.DefaultLimit)
    {
        ArgumentNullException.ThrowIfNull(json);
        using JsonDocument document = Parse(json);
        return Read(document.RootElement, limit);
    }

    /// <summary>Parses a file that may hold a circuit.</summary>
    /// <exception cref="CircuitException">Not JSON.</exception>
    public static JsonDocument Parse(Stream json)
    {
        try
        {
            return JsonDocument.Parse(json, new JsonDocumentOptions { MaxDepth = 16, AllowDuplicateProperties = false });
        }
        catch (JsonException e)
        {
            throw new CircuitException(
                FormattableString.Invariant($"is not JSON at line {(e.LineNumber ?? 0) + 1}, byte {(e.BytePositionInLine ?? 0) + 1}; a circuit file begins with {{\"format\": \"{Format}\"}}"), e);
        }
    }

    /// <summary>Reads a circuit from a parsed file.</summary>
    public static Circuit Read(JsonElement file, long limit = CircuitBuilder.DefaultLimit)
    {
        if (file.ValueKind != JsonValueKind.Object || !file.TryGetProperty("format", out JsonElement format) || format.ValueKind != JsonValueKind.String || format.GetString() != Format)
        {
            throw new CircuitException($"is no circuit file: it does not say \"format\": \"{Format}\"");
        }

        if (file.EnumerateObject().FirstOrDefault(p => !Keys.Contains(p.Name)) is { Value.ValueKind: not JsonValueKind.Undefined } odd)
        {
            throw new CircuitException($"{odd.Name} is no key of a circuit file; the keys are {string.Join(", ", Keys)}");
        }

        Variable[] variables = [.. Required(file, "variables", JsonValueKind.Array, "the file").EnumerateArray().Select(VariableJson.Read)];
        NodeTable nodes = new(Required(file, "nodes", JsonValueKind.Array, "the file"), variables);
        return nodes.Build(IdOf(Required(file, "root", JsonValueKind.Number, "the file"), "root"), limit);
    }

    internal static JsonElement Required(JsonElement of, string key, JsonValueKind kind, string where) =>
        of.TryGetProperty(key, out JsonElement value) && value.ValueKind == kind
            ? value
            : throw new CircuitException($"{where} needs {key}, {Article(kind)}");

    internal static long IdOf(JsonElement value, string key) => value.ValueKind == JsonValueKind.Number && value.TryGetInt64(out long id)
        ? id
        : throw new CircuitException($"{key} is {value.GetRawText()}, but ids of nodes are whole numbers");

    private static string Article(JsonValueKind kind) => kind switch
    {
        JsonValueKind.Array => "a list",
        JsonValueKind.Number => "a number",
        JsonValueKind.String => "a text",
        _ => "an object",
    };
}
