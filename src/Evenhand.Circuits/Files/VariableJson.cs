using System.Text.Json;
using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Files;

/// <summary>A variable as a circuit file writes it.</summary>
internal static class VariableJson
{
    private static readonly string[] Keys = ["name", "kind", "values", "edges", "centres"];

    /// <summary>Reads a variable.</summary>
    public static Variable Read(JsonElement json)
    {
        string name = json.ValueKind == JsonValueKind.Object
            ? CircuitReader.Required(json, "name", JsonValueKind.String, "each variable").GetString()!
            : throw new CircuitException($"variables holds {json.GetRawText()}, but each is an object with name and kind");
        if (json.EnumerateObject().FirstOrDefault(p => !Keys.Contains(p.Name)) is { Value.ValueKind: not JsonValueKind.Undefined } odd)
        {
            throw new CircuitException($"variable {name}: {odd.Name} is no key of a variable; the keys are {string.Join(", ", Keys)}");
        }

        string kind = CircuitReader.Required(json, "kind", JsonValueKind.String, $"variable {name}").GetString()!;
        try
        {
            return kind switch
            {
                "category" => Variable.Category(name, Texts(CircuitReader.Required(json, "values", JsonValueKind.Array, $"variable {name}"), name)),
                "number" when json.TryGetProperty("edges", out JsonElement edges) => Variable.Binned(name, Edges(edges, name), Centres(json, name)),
                "number" => Variable.Continuous(name),
                _ => throw new CircuitException($"variable {name}: the kind {kind} is neither category nor number"),
            };
        }
        catch (ArgumentException e)
        {
            throw new CircuitException(e.Message.Split(" (Parameter", 2)[0], e);
        }
    }

    /// <summary>Writes a variable.</summary>
    public static void Write(Utf8JsonWriter json, Variable variable)
    {
        json.WriteStartObject();
        json.WriteString("name", variable.Name);
        json.WriteString("kind", variable.Kind == VariableKind.Category ? "category" : "number");
        if (variable.Kind == VariableKind.Category)
        {
            json.WriteStartArray("values");
            foreach (string value in variable.Values)
            {
                json.WriteStringValue(value);
            }

            json.WriteEndArray();
        }

        WriteNumbers(json, "edges", variable.Edges);
        WriteNumbers(json, "centres", variable.Centres);
        json.WriteEndObject();
    }

    private static void WriteNumbers(Utf8JsonWriter json, string key, IReadOnlyList<double> numbers)
    {
        if (numbers.Count == 0)
        {
            return;
        }

        json.WriteStartArray(key);
        foreach (double number in numbers)
        {
            if (double.IsFinite(number))
            {
                json.WriteNumberValue(number);
            }
            else
            {
                json.WriteNullValue();
            }
        }

        json.WriteEndArray();
    }

    private static IEnumerable<string> Texts(JsonElement list, string name) => list.EnumerateArray().Select(v => v.ValueKind == JsonValueKind.String
        ? v.GetString()!
        : throw new CircuitException($"variable {name}: values holds {v.GetRawText()}, which is no text"));

    private static double[] Edges(JsonElement list, string name)
    {
        double[] edges = Numbers(list, name, "edges");
        for (int i = 0; i < edges.Length; i++)
        {
            bool isEnd = i == 0 || i == edges.Length - 1;
            if (double.IsNaN(edges[i]))
            {
                edges[i] = isEnd
                    ? (i == 0 ? double.NegativeInfinity : double.PositiveInfinity)
                    : throw new CircuitException($"variable {name}: edges holds null between others; only the first and last may be open");
            }
        }

        return edges;
    }

    private static double[]? Centres(JsonElement json, string name) =>
        json.TryGetProperty("centres", out JsonElement centres) ? Numbers(centres, name, "centres") : null;

    private static double[] Numbers(JsonElement list, string name, string key) => list.ValueKind == JsonValueKind.Array
        ? [.. list.EnumerateArray().Select(v => v.ValueKind switch
        {
            JsonValueKind.Null => double.NaN,
            JsonValueKind.Number when double.IsFinite(v.GetDouble()) => v.GetDouble(),
            _ => throw new CircuitException($"variable {name}: {key} holds {v.GetRawText()}, which is neither a number nor null"),
        })]
        : throw new CircuitException($"variable {name}: {key} is no list");
}
