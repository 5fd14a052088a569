using System.Globalization;
using System.Text;
using System.Text.Json;
using System.Text.Json.Nodes;
using System.Text.Unicode;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>Walks a tree of nodes and hands it to a writer.</summary>
internal static class CanonicalJsonTree
{
    /// <summary>Appends a node that stands <paramref name="depth"/> levels deep.</summary>
    /// <exception cref="CanonicalJsonException">A value has no canonical form.</exception>
    public static void Write(JsonNode? node, CanonicalJsonWriter writer, int depth)
    {
        switch (node)
        {
            case null:
                writer.Raw("null"u8);
                break;
            case JsonObject container:
                Object(container, writer, Deeper(container, depth));
                break;
            case JsonArray items:
                Array(items, writer, Deeper(items, depth));
                break;
            default:
                Value(node.AsValue(), writer);
                break;
        }
    }

    private static CanonicalJsonException At(JsonNode node, string what) => new($"At {node.GetPath()}: {what}.");

    private static int Deeper(JsonNode node, int depth) => depth < CanonicalJson.MaxDepth
        ? depth + 1
        : throw At(node, string.Create(CultureInfo.InvariantCulture, $"nested more than {CanonicalJson.MaxDepth} deep"));

    private static void Object(JsonObject container, CanonicalJsonWriter writer, int depth)
    {
        var open = writer.BeginObject();
        try
        {
            foreach (var (name, value) in container)
            {
                Encode(name, container, writer, (utf8, to) => to.Name(open, utf8));
                Write(value, writer, depth);
            }
        }
        catch (ArgumentException e)
        {
            // The platform's tree finds a repeated name only when it is walked.
            throw new CanonicalJsonException($"At {container.GetPath()}: {e.Message}", e);
        }

        writer.EndObject(open);
    }

    private static void Array(JsonArray items, CanonicalJsonWriter writer, int depth)
    {
        writer.Raw((byte)'[');
        for (var i = 0; i < items.Count; i++)
        {
            if (i > 0)
            {
                writer.Raw((byte)',');
            }

            Write(items[i], writer, depth);
        }

        writer.Raw((byte)']');
    }

    private static void Value(JsonValue value, CanonicalJsonWriter writer)
    {
        if (value.TryGetValue(out JsonElement element))
        {
            Text(value, element.GetRawText(), writer);
        }
        else if (value.TryGetValue(out string? text))
        {
            Encode(text, value, writer, static (utf8, to) => to.String(utf8));
        }
        else if (value.TryGetValue(out bool truth))
        {
            writer.Raw(truth ? "true"u8 : "false"u8);
        }
        else if (Whole(value) is { } whole)
        {
            writer.Number(whole is >= -CanonicalJson.MaxSafeInteger and <= CanonicalJson.MaxSafeInteger ? whole : throw TooLarge(value));
        }
        else if (value.TryGetValue(out double number))
        {
            writer.Number(double.IsFinite(number) ? number : throw At(value, "NaN and infinities have no JSON form"));
        }
        else if (value.TryGetValue(out decimal exact))
        {
            var tooLarge = decimal.IsInteger(exact) && Math.Abs(exact) > CanonicalJson.MaxSafeInteger;
            writer.Number(tooLarge ? throw TooLarge(value) : (double)exact);
        }
        else
        {
            Text(value, value.ToJsonString(), writer);
        }
    }

    private static CanonicalJsonException TooLarge(JsonNode node) =>
        At(node, "an integer beyond 2^53 would lose digits as a number; give it as a string");

    private static long? Whole(JsonValue value) =>
        value.TryGetValue(out long wide) ? wide
        : value.TryGetValue(out int narrow) ? narrow
        : value.TryGetValue(out uint unsigned) ? unsigned
        : value.TryGetValue(out short small) ? small
        : value.TryGetValue(out byte least) ? least
        : null;

    private static void Text(JsonNode node, string json, CanonicalJsonWriter writer)
    {
        try
        {
            CanonicalJsonReader.Copy(Encoding.UTF8.GetBytes(json), writer);
        }
        catch (CanonicalJsonException e)
        {
            throw new CanonicalJsonException($"In {node.GetPath()}: {e.Message}", e);
        }
    }

    private delegate void Take(ReadOnlySpan<byte> utf8, CanonicalJsonWriter writer);

    private static void Encode(string text, JsonNode node, CanonicalJsonWriter writer, Take take)
    {
        const int OnStack = 384;
        var bytes = text.Length * 3 <= OnStack ? stackalloc byte[OnStack] : new byte[text.Length * 3];
        var status = Utf8.FromUtf16(text, bytes, out _, out var written, replaceInvalidSequences: false);
        if (status != System.Buffers.OperationStatus.Done)
        {
            throw At(node, "half of a surrogate pair in a string or a name");
        }

        take(bytes[..written], writer);
    }
}
