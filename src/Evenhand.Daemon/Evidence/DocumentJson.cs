using System.Text.Json;
using System.Text.Json.Nodes;

namespace Evenhand.Daemon.Evidence;

/// <summary>Reads stored documents that may be anything, since they come from outside.</summary>
internal static class DocumentJson
{
    // As deep as the chain is verified; a key given twice must not be read as either value.
    private static readonly JsonDocumentOptions Options = new() { MaxDepth = 128, AllowDuplicateProperties = false };

    /// <summary>Reads a document; null where it is no JSON object.</summary>
    public static JsonObject? TryParse(byte[] bytes)
    {
        try
        {
            return JsonNode.Parse(bytes, documentOptions: Options) as JsonObject;
        }
        catch (JsonException)
        {
            return null;
        }
    }

    /// <summary>The text at a member; null where there is none, or something else.</summary>
    public static string? Text(JsonNode? parent, string key) =>
        parent is JsonObject members && members[key] is JsonValue value && value.TryGetValue(out string? text) ? text : null;

    /// <summary>The whole number at a member; null where there is none, or something else.</summary>
    public static long? Whole(JsonNode? parent, string key) =>
        parent is JsonObject members && members[key] is JsonValue value && value.TryGetValue(out long whole) ? whole : null;
}
