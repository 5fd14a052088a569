using System.Text;
using System.Text.Json;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>
/// The members of a canonical object as stretches of its bytes. What is hashed, dropped or compared is
/// always a stretch of the stored bytes, never something written anew.
/// </summary>
internal sealed class SnapshotMembers
{
    private readonly SortedDictionary<string, ReadOnlyMemory<byte>> _values = new(StringComparer.Ordinal);

    /// <summary>No members yet.</summary>
    public SnapshotMembers()
    {
    }

    /// <summary>The members of a canonical object; null where the bytes are some other value.</summary>
    /// <param name="json">Bytes that <see cref="CanonicalJson.IsCanonical"/> accepts.</param>
    public static SnapshotMembers? Read(ReadOnlyMemory<byte> json)
    {
        var reader = new Utf8JsonReader(json.Span, new JsonReaderOptions { MaxDepth = CanonicalJson.MaxDepth });
        reader.Read();
        if (reader.TokenType != JsonTokenType.StartObject)
        {
            return null;
        }

        var members = new SnapshotMembers();
        while (reader.Read() && reader.TokenType == JsonTokenType.PropertyName)
        {
            var name = reader.GetString()!;
            reader.Read();
            var start = (int)reader.TokenStartIndex;
            reader.Skip();
            members._values[name] = json[start..(int)reader.BytesConsumed];
        }

        return members;
    }

    /// <summary>A member's value as canonical bytes; setting replaces, null takes away.</summary>
    public ReadOnlyMemory<byte>? this[string name]
    {
        // The cast matters: a bare null would turn into empty memory, which is not null.
        get => _values.TryGetValue(name, out var value) ? value : (ReadOnlyMemory<byte>?)null;
        set
        {
            // A null array converts to empty memory, not to null; no JSON value is empty.
            if (value is { IsEmpty: false } bytes)
            {
                _values[name] = bytes;
            }
            else
            {
                _values.Remove(name);
            }
        }
    }

    /// <summary>A member's text where it is a string.</summary>
    public string? Text(string name)
    {
        if (this[name] is not { } value || value.Span[0] != '"')
        {
            return null;
        }

        var reader = new Utf8JsonReader(value.Span);
        reader.Read();
        return reader.GetString();
    }

    /// <summary>A member's value where it is a whole number.</summary>
    public long? Whole(string name)
    {
        if (this[name] is not { } value)
        {
            return null;
        }

        var reader = new Utf8JsonReader(value.Span);
        return reader.Read() && reader.TokenType == JsonTokenType.Number && reader.TryGetInt64(out var whole) ? whole : null;
    }

    /// <summary>The canonical object of all members but some.</summary>
    public void Write(CanonicalJsonWriter writer, params ReadOnlySpan<string> without)
    {
        var open = writer.BeginObject();
        foreach (var (name, value) in _values)
        {
            if (!without.Contains(name))
            {
                writer.Name(open, Encoding.UTF8.GetBytes(name));
                writer.Raw(value.Span);
            }
        }

        writer.EndObject(open);
    }
}
