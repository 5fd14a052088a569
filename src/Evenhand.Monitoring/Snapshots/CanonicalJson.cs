using System.Diagnostics.CodeAnalysis;
using System.Text.Json.Nodes;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>
/// The JSON Canonicalization Scheme (RFC 8785): one document, one sequence of bytes. Members are sorted by
/// the UTF-16 code units of their names, numbers are IEEE 754 doubles written as ECMAScript writes them,
/// strings carry only the escapes that JSON needs, and there is no white space.
/// </summary>
/// <remarks>
/// Input must be I-JSON (RFC 7493) as far as a hash depends on it: NaN and infinities, names that occur
/// twice in one object, lone surrogates, invalid UTF-8 and anything after the value are refused.
/// </remarks>
public static class CanonicalJson
{
    /// <summary>The greatest nesting of objects and arrays that is read or written.</summary>
    public const int MaxDepth = 128;

    /// <summary>The greatest whole number, 2^53, up to which every integer is a double of its own.</summary>
    public const long MaxSafeInteger = 1L << 53;

    /// <summary>Writes a tree in its canonical form.</summary>
    /// <param name="node">The tree; null is the JSON literal <c>null</c>.</param>
    /// <returns>UTF-8 bytes without a byte order mark or a final newline.</returns>
    /// <exception cref="CanonicalJsonException">
    /// A value has no canonical form (NaN, a lone surrogate, an integer beyond 2^53, nesting beyond
    /// <see cref="MaxDepth"/>); the message gives its path.
    /// </exception>
    public static byte[] Serialize(JsonNode? node) => Serialize(node, depth: 0);

    /// <summary>Brings a JSON document into its canonical form.</summary>
    /// <param name="json">UTF-8 JSON text.</param>
    /// <returns>The canonical bytes.</returns>
    /// <exception cref="CanonicalJsonException">The text is no I-JSON; the message gives the byte offset.</exception>
    public static byte[] Canonicalize(ReadOnlySpan<byte> json)
    {
        var writer = new CanonicalJsonWriter(json.Length);
        CanonicalJsonReader.Copy(json, writer);
        return writer.Written.ToArray();
    }

    /// <summary>Says whether a document is, byte for byte, its own canonical form.</summary>
    /// <param name="json">The bytes in question; anything at all.</param>
    /// <returns>False also where the bytes are no JSON.</returns>
    public static bool IsCanonical(ReadOnlySpan<byte> json)
    {
        var writer = new CanonicalJsonWriter(json.Length);
        try
        {
            CanonicalJsonReader.Copy(json, writer);
        }
        catch (CanonicalJsonException)
        {
            return false;
        }

        return writer.Written.SequenceEqual(json);
    }

    /// <summary>
    /// A node for an integer of any size: a number within ±2^53, a string of its decimal digits beyond,
    /// where a reader that keeps numbers as doubles would lose digits (RFC 7493, section 2.2).
    /// </summary>
    /// <param name="value">The integer.</param>
    /// <returns>A number or a string node.</returns>
    [SuppressMessage("Naming", "CA1720", Justification = "JSON's own word for a number without a fraction.")]
    public static JsonNode Integer(long value) => value is >= -MaxSafeInteger and <= MaxSafeInteger
        ? JsonValue.Create(value)
        : JsonValue.Create(value.ToString(System.Globalization.CultureInfo.InvariantCulture));

    /// <summary>Writes a tree that will stand <paramref name="depth"/> levels deep in a document.</summary>
    internal static byte[] Serialize(JsonNode? node, int depth)
    {
        var writer = new CanonicalJsonWriter(256);
        CanonicalJsonTree.Write(node, writer, depth);
        return writer.Written.ToArray();
    }
}
