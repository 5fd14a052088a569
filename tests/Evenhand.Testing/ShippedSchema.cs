using System.Text.Json;
using System.Text.Json.Nodes;
using Json.Schema;

namespace Evenhand.Testing;

/// <summary>A JSON Schema (draft 2020-12) to hold documents against.</summary>
public sealed class ShippedSchema
{
    private static readonly EvaluationOptions Options = new() { OutputFormat = OutputFormat.List };

    private readonly JsonSchema _schema;

    /// <summary>Reads a schema.</summary>
    public ShippedSchema(string text) => _schema = JsonSchema.FromText(text);

    /// <summary>What is wrong with a document, a line each: where, and why; empty where it is valid.</summary>
    public string Errors(JsonNode? document)
    {
        EvaluationResults results = _schema.Evaluate(JsonSerializer.SerializeToElement(document), Options);
        return results.IsValid
            ? ""
            : string.Join('\n', (results.Details ?? []).Where(d => d.Errors is not null).SelectMany(d => d.Errors!.Select(e => $"{d.InstanceLocation}: {e.Value}")).Prepend("not valid"));
    }
}
