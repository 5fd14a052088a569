using System.Buffers;
using System.Buffers.Text;
using System.Globalization;
using System.Text;
using System.Text.Unicode;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>
/// Reads JSON text (RFC 8259, strictly) once, forward, and hands what it reads to a writer. It is a reader
/// of its own because a hash wants more refused than the platform's reader refuses, and every refusal placed.
/// </summary>
internal ref struct CanonicalJsonReader
{
    private static readonly SearchValues<byte> StringStops = SearchValues.Create(
        [.. Enumerable.Range(0, 0x20).Select(c => (byte)c), (byte)'"', (byte)'\\']);

    private readonly ReadOnlySpan<byte> _json;
    private readonly CanonicalJsonWriter _writer;
    private byte[] _unescaped = [];
    private int _at;

    private CanonicalJsonReader(ReadOnlySpan<byte> json, CanonicalJsonWriter writer)
    {
        _json = json;
        _writer = writer;
    }

    /// <summary>Appends the canonical form of a document to a writer.</summary>
    /// <exception cref="CanonicalJsonException">The text is no I-JSON.</exception>
    public static void Copy(ReadOnlySpan<byte> json, CanonicalJsonWriter writer)
    {
        if (!Utf8.IsValid(json))
        {
            throw At(FirstInvalid(json), "invalid UTF-8; JSON text must be UTF-8");
        }

        if (json.StartsWith("\uFEFF"u8))
        {
            throw At(0, "a byte order mark; JSON text must not have one");
        }

        var reader = new CanonicalJsonReader(json, writer);
        reader.Space();
        reader.Value(0);
        reader.Space();
        if (reader._at < json.Length)
        {
            throw At(reader._at, "something after the end of the value");
        }
    }

    private static CanonicalJsonException At(int offset, string what) =>
        new(string.Create(CultureInfo.InvariantCulture, $"At byte {offset}: {what}."));

    private static int FirstInvalid(ReadOnlySpan<byte> json)
    {
        var at = 0;
        while (Rune.DecodeFromUtf8(json[at..], out _, out var read) == OperationStatus.Done)
        {
            at += read;
        }

        return at;
    }

    private void Value(int depth)
    {
        switch (Peek())
        {
            case (byte)'{':
                Object(Deeper(depth));
                break;
            case (byte)'[':
                Array(Deeper(depth));
                break;
            case (byte)'"':
                _writer.String(Text());
                break;
            case (byte)'t':
                Literal("true"u8);
                break;
            case (byte)'f':
                Literal("false"u8);
                break;
            case (byte)'n':
                Literal("null"u8);
                break;
            default:
                Number();
                break;
        }
    }

    private readonly int Deeper(int depth) => depth < CanonicalJson.MaxDepth
        ? depth + 1
        : throw At(_at, string.Create(CultureInfo.InvariantCulture, $"nested more than {CanonicalJson.MaxDepth} deep"));

    private void Object(int depth)
    {
        var start = _at;
        _at++;
        var open = _writer.BeginObject();
        Space();
        if (Peek() == '}')
        {
            _at++;
        }
        else
        {
            do
            {
                Space();
                Member(open, depth);
            }
            while (More((byte)'}'));
        }

        if (_writer.EndObject(open) is { } twice)
        {
            throw At(start, $"the name '{twice}' occurs more than once in the object that begins here");
        }
    }

    private void Member(in CanonicalJsonWriter.OpenObject open, int depth)
    {
        if (Peek() != '"')
        {
            throw At(_at, "a member's name in double quotes is missing");
        }

        _writer.Name(open, Text());
        Space();
        if (Peek() != ':')
        {
            throw At(_at, "the colon after a member's name is missing");
        }

        _at++;
        Space();
        Value(depth);
    }

    private void Array(int depth)
    {
        _at++;
        _writer.Raw((byte)'[');
        Space();
        if (Peek() == ']')
        {
            _at++;
        }
        else
        {
            var first = true;
            do
            {
                if (!first)
                {
                    _writer.Raw((byte)',');
                }

                first = false;
                Space();
                Value(depth);
            }
            while (More((byte)']'));
        }

        _writer.Raw((byte)']');
    }

    // After a member or an item: true past a comma, false past the end.
    private bool More(byte end)
    {
        Space();
        var next = Peek();
        if (next != ',' && next != end)
        {
            throw At(_at, $"a comma or '{(char)end}' is missing");
        }

        _at++;
        return next == ',';
    }

    private void Literal(ReadOnlySpan<byte> word)
    {
        if (!_json[_at..].StartsWith(word))
        {
            throw At(_at, "not a JSON value");
        }

        _writer.Raw(word);
        _at += word.Length;
    }

    private void Number()
    {
        var start = _at;
        Skip((byte)'-');
        if (!Skip((byte)'0'))
        {
            Digits(start);
        }

        if (Skip((byte)'.'))
        {
            Digits(start);
        }

        if (Skip((byte)'e') || Skip((byte)'E'))
        {
            _ = Skip((byte)'+') || Skip((byte)'-');
            Digits(start);
        }

        Append(_json[start.._at], start);
    }

    private readonly void Append(ReadOnlySpan<byte> text, int start)
    {
        // Up to 15 digits are a whole number that double.Parse need not see.
        if (text.Length <= 15 && Utf8Parser.TryParse(text, out long whole, out var read) && read == text.Length)
        {
            _writer.Number(whole);
            return;
        }

        var value = double.Parse(text, NumberStyles.Float, CultureInfo.InvariantCulture);
        if (!double.IsFinite(value))
        {
            throw At(start, "a number beyond the range of a double");
        }

        _writer.Number(value);
    }

    private void Digits(int start)
    {
        var end = _json[_at..].IndexOfAnyExceptInRange((byte)'0', (byte)'9');
        var count = end < 0 ? _json.Length - _at : end;
        if (count == 0)
        {
            throw At(start, start == _at ? "not a JSON value" : "not a JSON number");
        }

        _at += count;
    }

    // A string as unescaped UTF-8; valid until the next one is read.
    private ReadOnlySpan<byte> Text()
    {
        var start = ++_at;
        var stop = Stop();
        if (_json[stop] == '"')
        {
            _at = stop + 1;
            return _json[start..stop];
        }

        var length = 0;
        while (_json[stop] == '\\')
        {
            Room(length + (stop - _at) + 4);
            _json[_at..stop].CopyTo(_unescaped.AsSpan(length));
            length += stop - _at;
            _at = stop;
            length += Unescape(_unescaped.AsSpan(length));
            stop = Stop();
        }

        Room(length + (stop - _at));
        _json[_at..stop].CopyTo(_unescaped.AsSpan(length));
        length += stop - _at;
        _at = stop + 1;
        return _unescaped.AsSpan(0, length);
    }

    private readonly int Stop()
    {
        var stop = _json[_at..].IndexOfAny(StringStops);
        if (stop < 0)
        {
            throw At(_json.Length, "the end, inside a string");
        }

        return _json[_at + stop] < 0x20
            ? throw At(_at + stop, "a control character inside a string; write it as an escape")
            : _at + stop;
    }

    private void Room(int count)
    {
        if (_unescaped.Length < count)
        {
            System.Array.Resize(ref _unescaped, Math.Max(count, 2 * _unescaped.Length));
        }
    }

    private int Unescape(Span<byte> to)
    {
        var start = _at;
        _at++;
        var letter = Peek();
        _at++;
        if (letter == 'u')
        {
            return new Rune(CodePoint(start)).EncodeToUtf8(to);
        }

        to[0] = letter switch
        {
            (byte)'"' or (byte)'\\' or (byte)'/' => letter,
            (byte)'b' => 8,
            (byte)'t' => 9,
            (byte)'n' => 10,
            (byte)'f' => 12,
            (byte)'r' => 13,
            _ => throw At(start, "an unknown escape inside a string"),
        };
        return 1;
    }

    private int CodePoint(int start)
    {
        var first = Hex(start);
        if (!char.IsSurrogate((char)first))
        {
            return first;
        }

        if (!char.IsHighSurrogate((char)first) || !_json[_at..].StartsWith("\\u"u8))
        {
            throw At(start, "half of a surrogate pair inside a string");
        }

        _at += 2;
        var second = Hex(start);
        return char.IsLowSurrogate((char)second)
            ? char.ConvertToUtf32((char)first, (char)second)
            : throw At(start, "half of a surrogate pair inside a string");
    }

    private int Hex(int start)
    {
        var value = 0;
        for (var i = 0; i < 4; i++, _at++)
        {
            var c = (char)Peek();
            if (!char.IsAsciiHexDigit(c))
            {
                throw At(start, "an escape \\u without four hexadecimal digits");
            }

            value = (value << 4) | (char.IsAsciiDigit(c) ? c - '0' : (c | 0x20) - 'a' + 10);
        }

        return value;
    }

    private bool Skip(byte wanted)
    {
        var there = _at < _json.Length && _json[_at] == wanted;
        _at += there ? 1 : 0;
        return there;
    }

    private readonly byte Peek() => _at < _json.Length ? _json[_at] : throw At(_at, "the end, where more must follow");

    private void Space()
    {
        while (_at < _json.Length && _json[_at] is (byte)' ' or (byte)'\t' or (byte)'\n' or (byte)'\r')
        {
            _at++;
        }
    }
}
