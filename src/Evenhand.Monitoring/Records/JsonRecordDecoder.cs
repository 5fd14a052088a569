using System.Text.Unicode;
using Evenhand.Monitoring.Charters;

namespace Evenhand.Monitoring.Records;

/// <summary>
/// Decodes JSON records (RFC 8259), one object each, into batches: read once, forward only, nothing allocated per record
/// after the first ones.
/// </summary>
/// <remarks>
/// <para>Of several places of a field the first present one wins; JSON's null counts as absent there and is missing in the
/// end. Strings are compared by their value, numbers and <c>true</c>, <c>false</c> by their JSON text. An object or an array
/// where a scalar is looked for is unlisted in a coded field and in the score, missing in a slice, and otherwise a reason for
/// rejection.</para>
/// <para>The first reason of this order counts: blank_line, too_long, invalid_utf8; malformed_json or too_deep, whichever
/// comes first in the line; not_an_object; duplicate_key; lone_surrogate; then the id, the time, and the decision or the
/// outcome. Keys that the charter does not read may stand twice.</para>
/// <para>Not safe for use by several threads at once.</para>
/// </remarks>
public sealed class JsonRecordDecoder
{
    /// <summary>Most bytes of a record.</summary>
    public const int MaximumLength = 1 << 20;

    /// <summary>Most objects and arrays inside one another.</summary>
    public const int MaximumDepth = 64;

    private const int TooDeep = -2;

    private readonly RecordEncoder _encoder;
    private readonly PathNode[] _nodes;
    private readonly RecordValue[] _values;
    private byte[] _scratch = new byte[1024];
    private long _serial;
    private bool _duplicate;
    private bool _escaped;

    /// <summary>Prepares for the records of a charter.</summary>
    /// <param name="charter">The charter.</param>
    /// <param name="layout">Its layout; batches are made for the same.</param>
    /// <param name="hasher">The hash of ids.</param>
    /// <param name="kind">What the records are.</param>
    /// <exception cref="ArgumentException">Outcomes are asked for and the charter has no <c>id</c> or no <c>outcome</c>.</exception>
    public JsonRecordDecoder(Charter charter, RecordLayout layout, IdHasher hasher, RecordKind kind)
    {
        _encoder = new RecordEncoder(charter, layout, hasher, kind);
        _nodes = new PathTrie(_encoder.Places.Places).Nodes;
        _values = new RecordValue[_encoder.Places.Places.Count];
    }

    /// <summary>Event time, in microseconds since 1970-01-01T00:00:00Z, of records of a charter without <c>time</c>. Default 0.</summary>
    public long DefaultTime
    {
        get => _encoder.DefaultTime;
        set => _encoder.DefaultTime = value;
    }

    /// <summary>Decodes one record into the batch's next entry, as a record or as a rejection; never throws for bad input.</summary>
    /// <param name="utf8">The record's bytes, without a line end.</param>
    /// <param name="batch">Not full.</param>
    /// <param name="position">The record's position in its source, from 0.</param>
    public void Decode(ReadOnlySpan<byte> utf8, RecordBatch batch, long position)
    {
        ArgumentNullException.ThrowIfNull(batch);
        ReadOnlySpan<byte> bytes = utf8;
        RejectReason reason = Read(utf8);
        if (reason == RejectReason.None && _escaped)
        {
            reason = Unescape(utf8, out bytes);
        }

        if (reason == RejectReason.None)
        {
            reason = _encoder.Encode(bytes, _values, batch);
        }

        if (reason == RejectReason.None)
        {
            batch.Accept(position);
        }
        else
        {
            batch.Reject(reason, position, utf8);
        }
    }

    private RejectReason Read(ReadOnlySpan<byte> line)
    {
        _serial++;
        _duplicate = false;
        _escaped = false;
        Array.Clear(_values);
        int at = JsonTokens.SkipSpace(line, 0);
        if (at == line.Length)
        {
            return RejectReason.BlankLine;
        }

        if (line.Length > MaximumLength)
        {
            return RejectReason.TooLong;
        }

        if (!Utf8.IsValid(line))
        {
            return RejectReason.InvalidUtf8;
        }

        bool isObject = line[at] == '{';
        int end = isObject ? ReadObject(line, _nodes[0], at + 1, 1) : SkipValue(line, at, 0);
        if (end < 0)
        {
            return end == TooDeep ? RejectReason.TooDeep : RejectReason.MalformedJson;
        }

        if (JsonTokens.SkipSpace(line, end) != line.Length)
        {
            return RejectReason.MalformedJson;
        }

        return !isObject ? RejectReason.NotAnObject : _duplicate ? RejectReason.DuplicateKey : RejectReason.None;
    }

    /// <summary>Reads an object of which something is wanted.</summary>
    /// <param name="line">The line.</param>
    /// <param name="node">Its node.</param>
    /// <param name="at">The position after its brace.</param>
    /// <param name="depth">Its depth; the record's own is 1.</param>
    /// <returns>The position after the closing brace, or a negative reason.</returns>
    private int ReadObject(ReadOnlySpan<byte> line, PathNode node, int at, int depth)
    {
        unchecked
        {
            KeyMemory keys = node.Keys;
            int member = KeyMemory.Start;
            for (bool first = true; ; first = false)
            {
                at = JsonTokens.SkipSpace(line, at);
                if ((uint)at >= (uint)line.Length)
                {
                    return JsonTokens.Malformed;
                }

                if (line[at] == '}')
                {
                    return at + 1;
                }

                if (!first)
                {
                    if (line[at] != ',')
                    {
                        return JsonTokens.Malformed;
                    }

                    at++;
                }

                int next = keys.Match(member, line[at..], out int child, out int length);
                if (next < 0)
                {
                    length = ReadKey(line[at..], node, out child);
                    if (length < 0)
                    {
                        return JsonTokens.Malformed;
                    }

                    next = keys.Learn(member, line.Slice(at, length), child);
                }

                member = next;
                at += length;
                at = child < 0 ? SkipValue(line, at, depth) : ReadValue(line, _nodes[child], at, depth);
                if (at < 0)
                {
                    return at;
                }
            }
        }
    }

    /// <summary>Reads a key and its colon; gives the distance to the value.</summary>
    private int ReadKey(ReadOnlySpan<byte> rest, PathNode node, out int child)
    {
        unchecked
        {
            child = TextTable.None;
            int start = JsonTokens.SkipSpace(rest, 0) + 1;
            if (start > rest.Length || rest[start - 1] != '"')
            {
                return JsonTokens.Malformed;
            }

            bool escaped = false;
            int end = JsonTokens.EndOfString(rest, start, ref escaped);
            if (end < 0)
            {
                return JsonTokens.Malformed;
            }

            int colon = JsonTokens.SkipSpace(rest, end + 1);
            if (colon == rest.Length || rest[colon] != ':')
            {
                return JsonTokens.Malformed;
            }

            ReadOnlySpan<byte> key = rest[start..end];
            child = escaped ? FindEscaped(node, key) : node.Names.Find(key);
            return JsonTokens.SkipSpace(rest, colon + 1);
        }
    }

    private int FindEscaped(PathNode node, ReadOnlySpan<byte> key)
    {
        MakeRoom(key.Length);
        int length = JsonText.Unescape(key, _scratch);
        return length == JsonText.LoneSurrogate ? TextTable.None : node.Names.Find(_scratch.AsSpan(0, length));
    }

    /// <summary>Reads a value that is wanted, or of which something is.</summary>
    private int ReadValue(ReadOnlySpan<byte> line, PathNode node, int at, int depth)
    {
        unchecked
        {
            if (node.SeenIn == _serial)
            {
                _duplicate = true;
            }

            node.SeenIn = _serial;
            at = JsonTokens.SkipSpace(line, at);
            if ((uint)at >= (uint)line.Length)
            {
                return JsonTokens.Malformed;
            }

            byte first = line[at];
            if (first is (byte)'{' or (byte)'[')
            {
                Keep(node, ValueKind.Container, at, 0);
                return ReadContainer(line, node, at, depth);
            }

            if (first == '"')
            {
                bool escaped = false;
                int close = JsonTokens.EndOfString(line, at + 1, ref escaped);
                if (close >= 0)
                {
                    Keep(node, escaped ? ValueKind.EscapedText : ValueKind.Text, at + 1, close - at - 1);
                    _escaped |= escaped;
                    return close + 1;
                }

                return JsonTokens.Malformed;
            }

            bool number = first <= '9';
            int end = number ? JsonTokens.EndOfNumber(line, at) : JsonTokens.EndOfLiteral(line, at);
            if (end >= 0)
            {
                Keep(node, number ? ValueKind.Number : first == 'n' ? ValueKind.Null : ValueKind.Literal, at, end - at);
            }

            return end;
        }
    }

    private void Keep(PathNode node, ValueKind kind, int start, int length)
    {
        if (node.Slot >= 0)
        {
            _values[node.Slot] = new RecordValue(kind, start, length);
        }
    }

    private int ReadContainer(ReadOnlySpan<byte> line, PathNode node, int at, int depth)
    {
        if (depth == MaximumDepth)
        {
            return TooDeep;
        }

        if (line[at] == '{')
        {
            return node.IsInner ? ReadObject(line, node, at + 1, depth + 1) : SkipObject(line, at + 1, depth + 1);
        }

        return ReadArray(line, node, at + 1, depth + 1);
    }

    private int ReadArray(ReadOnlySpan<byte> line, PathNode? node, int at, int depth)
    {
        unchecked
        {
            int wanted = 0;
            for (int index = 0; ; index++)
            {
                at = JsonTokens.SkipSpace(line, at);
                if (at < line.Length && line[at] == ']' && index == 0)
                {
                    return at + 1;
                }

                PathNode? element = null;
                if (node is not null && wanted < node.Elements.Count && node.Elements[wanted].Index == index)
                {
                    element = _nodes[node.Elements[wanted++].Child];
                }

                at = element is null ? SkipValue(line, at, depth) : ReadValue(line, element, at, depth);
                if (at < 0)
                {
                    return at;
                }

                at = JsonTokens.SkipSpace(line, at);
                if (at >= line.Length || line[at] is not ((byte)',' or (byte)']'))
                {
                    return JsonTokens.Malformed;
                }

                if (line[at++] == ']')
                {
                    return at;
                }
            }
        }
    }

    private int SkipObject(ReadOnlySpan<byte> line, int at, int depth)
    {
        unchecked
        {
            for (bool first = true; ; first = false)
            {
                at = JsonTokens.SkipSpace(line, at);
                if (at < line.Length && line[at] == '}' && first)
                {
                    return at + 1;
                }

                bool escaped = false;
                int end = at < line.Length && line[at] == '"' ? JsonTokens.EndOfString(line, at + 1, ref escaped) : JsonTokens.Malformed;
                int colon = end < 0 ? line.Length : JsonTokens.SkipSpace(line, end + 1);
                if (colon >= line.Length || line[colon] != ':')
                {
                    return JsonTokens.Malformed;
                }

                at = SkipValue(line, colon + 1, depth);
                if (at < 0)
                {
                    return at;
                }

                at = JsonTokens.SkipSpace(line, at);
                if (at >= line.Length || line[at] is not ((byte)',' or (byte)'}'))
                {
                    return JsonTokens.Malformed;
                }

                if (line[at++] == '}')
                {
                    return at;
                }
            }
        }
    }

    /// <summary>Checks a value of which nothing is wanted.</summary>
    private int SkipValue(ReadOnlySpan<byte> line, int at, int depth)
    {
        unchecked
        {
            at = JsonTokens.SkipSpace(line, at);
            if ((uint)at >= (uint)line.Length)
            {
                return JsonTokens.Malformed;
            }

            byte first = line[at];
            if (first == '"')
            {
                bool escaped = false;
                int close = JsonTokens.EndOfString(line, at + 1, ref escaped);
                return close < 0 ? close : close + 1;
            }

            if (first is (byte)'{' or (byte)'[')
            {
                if (depth == MaximumDepth)
                {
                    return TooDeep;
                }

                return first == '{' ? SkipObject(line, at + 1, depth + 1) : ReadArray(line, null, at + 1, depth + 1);
            }

            return first <= '9' ? JsonTokens.EndOfNumber(line, at) : JsonTokens.EndOfLiteral(line, at);
        }
    }

    /// <summary>Replaces the escaped values by their texts, in a copy of the line that the texts follow.</summary>
    private RejectReason Unescape(ReadOnlySpan<byte> line, out ReadOnlySpan<byte> bytes)
    {
        // A value is never longer than its escaped form, and the forms are stretches of the line.
        MakeRoom(line.Length * 2);
        line.CopyTo(_scratch);
        int end = line.Length;
        bytes = _scratch;
        foreach (ref RecordValue value in _values.AsSpan())
        {
            if (value.Kind != ValueKind.EscapedText)
            {
                continue;
            }

            int length = JsonText.Unescape(value.Of(line), _scratch.AsSpan(end));
            if (length == JsonText.LoneSurrogate)
            {
                return RejectReason.LoneSurrogate;
            }

            value = new RecordValue(ValueKind.Text, end, length);
            end += length;
        }

        return RejectReason.None;
    }

    private void MakeRoom(int length)
    {
        if (_scratch.Length < length)
        {
            _scratch = new byte[length];
        }
    }
}
