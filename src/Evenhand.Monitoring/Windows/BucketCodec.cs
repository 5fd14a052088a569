namespace Evenhand.Monitoring.Windows;

/// <summary>The stored form of a bucket's sums: <c>evenhand-bucket/1</c>, see <c>bucket-format.md</c>.</summary>
/// <remarks>
/// One version byte, the number of integers (varint), then alternately the length of a run of zeros (varint) and the length
/// of a run of others (varint) with their values (zigzag varint); at the end the first 8 bytes of the SHA-256 of all before.
/// </remarks>
public static class BucketCodec
{
    private const byte Version = 1;

    /// <summary>Packs sums.</summary>
    public static byte[] Pack(ReadOnlySpan<long> values)
    {
        PackedWriter writer = new(16 + (values.Length / 4));
        writer.Byte(Version);
        writer.Number((ulong)values.Length);
        int at = 0;
        while (at < values.Length)
        {
            ReadOnlySpan<long> rest = values[at..];
            int zeros = rest.IndexOfAnyExcept(0L);
            zeros = zeros < 0 ? rest.Length : zeros;
            int others = rest[zeros..].IndexOf(0L);
            others = others < 0 ? rest.Length - zeros : others;
            writer.Number((ulong)zeros);
            writer.Number((ulong)others);
            foreach (long value in rest.Slice(zeros, others))
            {
                writer.Number(unchecked((ulong)((value << 1) ^ (value >> 63))));
            }

            at += zeros + others;
        }

        return writer.Finish();
    }

    /// <summary>Adds packed sums to others, so that merging never unpacks zeros.</summary>
    /// <param name="packed">What <see cref="Pack"/> gave.</param>
    /// <param name="into">Sums of the same length.</param>
    /// <exception cref="StoredStateException">Wrong version, length or checksum.</exception>
    public static void AddTo(ReadOnlySpan<byte> packed, Span<long> into)
    {
        Verify(packed);
        PackedReader reader = new(packed[1..^Checksum.Length]);
        if (reader.Number() != (ulong)into.Length)
        {
            throw new StoredStateException("a stored bucket has another length than this charter's sums");
        }

        int at = 0;
        while (at < into.Length)
        {
            at += checked((int)reader.Number());
            int others = checked((int)reader.Number());
            if (others > into.Length - at)
            {
                throw new StoredStateException("a stored bucket runs over its length");
            }

            for (int end = at + others; at < end; at++)
            {
                ulong raw = reader.Number();
                into[at] += unchecked((long)(raw >> 1) ^ -(long)(raw & 1));
            }
        }
    }

    /// <summary>Checks version and checksum, not the length.</summary>
    /// <exception cref="StoredStateException">Wrong version or checksum.</exception>
    public static void Verify(ReadOnlySpan<byte> packed)
    {
        if (packed.Length < Checksum.Length + 2 || packed[0] != Version)
        {
            throw new StoredStateException("a stored bucket has an unknown format");
        }

        if (!Checksum.Holds(packed))
        {
            throw new StoredStateException("a stored bucket fails its checksum: the store is damaged; restore it, or replay into an empty one");
        }
    }

    private struct PackedWriter(int capacity)
    {
        private byte[] _bytes = new byte[capacity];
        private int _length;

        public void Byte(byte value)
        {
            Grow(1);
            _bytes[_length++] = value;
        }

        public void Number(ulong value)
        {
            Grow(10);
            while (value >= 0x80)
            {
                _bytes[_length++] = unchecked((byte)(value | 0x80));
                value >>= 7;
            }

            _bytes[_length++] = (byte)value;
        }

        public byte[] Finish()
        {
            byte[] result = new byte[_length + Checksum.Length];
            _bytes.AsSpan(0, _length).CopyTo(result);
            Checksum.Write(_bytes.AsSpan(0, _length), result.AsSpan(_length));
            return result;
        }

        private void Grow(int more)
        {
            if (_length + more > _bytes.Length)
            {
                Array.Resize(ref _bytes, Math.Max(_bytes.Length * 2, _length + more));
            }
        }
    }

    private ref struct PackedReader(ReadOnlySpan<byte> bytes)
    {
        private readonly ReadOnlySpan<byte> _bytes = bytes;
        private int _at;

        public ulong Number()
        {
            ulong value = 0;
            for (int shift = 0; shift < 64; shift += 7)
            {
                if (_at >= _bytes.Length)
                {
                    throw new StoredStateException("a stored bucket ends early");
                }

                byte next = _bytes[_at++];
                value |= (ulong)(next & 0x7F) << shift;
                if (next < 0x80)
                {
                    return value;
                }
            }

            throw new StoredStateException("a stored bucket holds a number out of range");
        }
    }
}
