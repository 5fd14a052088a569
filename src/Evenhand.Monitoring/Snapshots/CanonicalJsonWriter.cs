using System.Buffers;
using System.Text;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>
/// One growing buffer that values are appended to. An object's members are appended as they come and put
/// in order when the object ends, by moving their bytes, so that no tree of the document is ever held.
/// </summary>
internal sealed class CanonicalJsonWriter
{
    private static readonly SearchValues<byte> Escaped = SearchValues.Create(
        [.. Enumerable.Range(0, 0x20).Select(c => (byte)c), (byte)'"', (byte)'\\']);

    private readonly List<Member> _members = [];
    private byte[] _buffer;
    private int _length;

    // Names as unescaped UTF-8, of all objects now open, one after the other.
    private byte[] _names = new byte[256];
    private int _namesLength;
    private byte[] _moved = [];

    public CanonicalJsonWriter(int capacity) => _buffer = new byte[Math.Max(capacity, 16)];

    /// <summary>What has been written.</summary>
    public ReadOnlySpan<byte> Written => _buffer.AsSpan(0, _length);

    /// <summary>Forgets everything written and keeps the buffers.</summary>
    public void Clear()
    {
        _length = 0;
        _namesLength = 0;
        _members.Clear();
    }

    public void Raw(byte value)
    {
        Reserve(1);
        _buffer[_length++] = value;
    }

    public void Raw(ReadOnlySpan<byte> bytes)
    {
        Reserve(bytes.Length);
        bytes.CopyTo(_buffer.AsSpan(_length));
        _length += bytes.Length;
    }

    /// <summary>Appends a finite number.</summary>
    public void Number(double value)
    {
        Reserve(CanonicalNumber.MaxLength);
        _length += CanonicalNumber.Format(value, _buffer.AsSpan(_length));
    }

    /// <summary>Appends a string given as valid, unescaped UTF-8.</summary>
    public void String(ReadOnlySpan<byte> text)
    {
        Raw((byte)'"');
        while (text.IndexOfAny(Escaped) is var at and >= 0)
        {
            Raw(text[..at]);
            Escape(text[at]);
            text = text[(at + 1)..];
        }

        Raw(text);
        Raw((byte)'"');
    }

    /// <summary>Opens an object; hand the result to <see cref="Name"/> and <see cref="EndObject"/>.</summary>
    public OpenObject BeginObject()
    {
        Raw((byte)'{');
        return new OpenObject(_members.Count, _namesLength, _length);
    }

    /// <summary>Begins a member: its name and the colon. The value follows.</summary>
    public void Name(in OpenObject open, ReadOnlySpan<byte> name)
    {
        CloseMember(open);
        if (_names.Length - _namesLength < name.Length)
        {
            Array.Resize(ref _names, Math.Max(_names.Length * 2, _namesLength + name.Length));
        }

        name.CopyTo(_names.AsSpan(_namesLength));
        _members.Add(new Member(_namesLength, name.Length, _length, 0));
        _namesLength += name.Length;
        String(name);
        Raw((byte)':');
    }

    /// <summary>Ends an object: sorts its members and writes the commas.</summary>
    /// <returns>A name that occurs twice, else null.</returns>
    public string? EndObject(in OpenObject open)
    {
        CloseMember(open);
        var members = System.Runtime.InteropServices.CollectionsMarshal.AsSpan(_members)[open.FirstMember..];
        var sorted = InOrder(members);
        if (!sorted)
        {
            members.Sort(new ByName(this));
        }

        string? twice = sorted ? null : Repeated(members);
        Lay(members, open.Start, sorted);
        _members.RemoveRange(open.FirstMember, _members.Count - open.FirstMember);
        _namesLength = open.Names;
        Raw((byte)'}');
        return twice;
    }

    /// <summary>
    /// Order of UTF-16 code units, read off UTF-8. The two differ only where a character above U+FFFF
    /// (lead byte F0 and up, in UTF-16 a surrogate of D800 to DFFF) meets one of U+E000 to U+FFFF (lead byte EE, EF).
    /// </summary>
    internal static int CompareNames(ReadOnlySpan<byte> left, ReadOnlySpan<byte> right)
    {
        var at = left.CommonPrefixLength(right);
        if (at == left.Length || at == right.Length)
        {
            return left.Length.CompareTo(right.Length);
        }

        byte a = left[at], b = right[at];
        return a >= 0xEE && b >= 0xEE && (a >= 0xF0) != (b >= 0xF0) ? b.CompareTo(a) : a.CompareTo(b);
    }

    private static readonly byte[] ShortEscapes = "btn fr"u8.ToArray();

    private void Escape(byte value)
    {
        Raw((byte)'\\');
        if (value is (byte)'"' or (byte)'\\')
        {
            Raw(value);
        }
        else if (value is >= 8 and <= 13 and not 11)
        {
            Raw(ShortEscapes[value - 8]);
        }
        else
        {
            Raw("u00"u8);
            Raw((byte)('0' + (value >> 4)));
            Raw("0123456789abcdef"u8[value & 15]);
        }
    }

    // Every member but the first is preceded by a comma when laid out, so a member in the buffer is
    // followed by one byte of room for it.
    private void CloseMember(in OpenObject open)
    {
        if (_members.Count > open.FirstMember)
        {
            _members[^1] = _members[^1] with { End = _length };
            Raw((byte)',');
        }
    }

    private bool InOrder(ReadOnlySpan<Member> members)
    {
        for (var i = 1; i < members.Length; i++)
        {
            if (CompareNames(NameOf(members[i - 1]), NameOf(members[i])) >= 0)
            {
                return false;
            }
        }

        return true;
    }

    private string? Repeated(ReadOnlySpan<Member> members)
    {
        for (var i = 1; i < members.Length; i++)
        {
            if (NameOf(members[i - 1]).SequenceEqual(NameOf(members[i])))
            {
                return Encoding.UTF8.GetString(NameOf(members[i]));
            }
        }

        return null;
    }

    private void Lay(ReadOnlySpan<Member> members, int start, bool sorted)
    {
        if (members.IsEmpty)
        {
            return;
        }

        if (!sorted)
        {
            var size = _length - start;
            if (_moved.Length < size)
            {
                _moved = new byte[Math.Max(size, _moved.Length * 2)];
            }

            _buffer.AsSpan(start, size).CopyTo(_moved);
            _length = start;
            foreach (var member in members)
            {
                Raw(_moved.AsSpan(member.Start - start, member.End - member.Start));
                Raw((byte)',');
            }
        }

        _length--;
    }

    private ReadOnlySpan<byte> NameOf(in Member member) => _names.AsSpan(member.Name, member.NameLength);

    private void Reserve(int count)
    {
        if (_buffer.Length - _length < count)
        {
            var wanted = Math.Max((long)_length + count, Math.Min(2L * _buffer.Length, Array.MaxLength));
            Array.Resize(ref _buffer, checked((int)wanted));
        }
    }

    /// <summary>Where an object begins in the three stacks.</summary>
    internal readonly record struct OpenObject(int FirstMember, int Names, int Start);

    private readonly record struct Member(int Name, int NameLength, int Start, int End);

    private readonly struct ByName(CanonicalJsonWriter writer) : IComparer<Member>
    {
        public int Compare(Member x, Member y) => CompareNames(writer.NameOf(x), writer.NameOf(y));
    }
}
