using System.Buffers.Binary;
using System.Runtime.CompilerServices;

namespace Evenhand.Monitoring.Records;

/// <summary>Short byte strings as machine words, so that most comparisons of values and keys are one instruction.</summary>
internal static class Packed
{
    /// <summary>The first eight bytes, little-endian, zero-padded.</summary>
    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    public static ulong Prefix(ReadOnlySpan<byte> bytes)
    {
        if (bytes.Length >= 8)
        {
            return BinaryPrimitives.ReadUInt64LittleEndian(bytes);
        }

        if (bytes.Length >= 4)
        {
            // Both reads overlap in the middle, where they hold the same bytes.
            ulong low = BinaryPrimitives.ReadUInt32LittleEndian(bytes);
            ulong high = BinaryPrimitives.ReadUInt32LittleEndian(bytes[(bytes.Length - 4)..]);
            return low | (high << ((bytes.Length - 4) * 8));
        }

        if (bytes.Length == 0)
        {
            return 0;
        }

        ulong first = bytes[0];
        ulong middle = (ulong)bytes[bytes.Length >> 1] << ((bytes.Length >> 1) * 8);
        ulong last = (ulong)bytes[^1] << ((bytes.Length - 1) * 8);
        return first | middle | last;
    }

    /// <summary>A hash for tables of the charter's own texts; not for keys that a stranger chooses at will.</summary>
    public static uint Hash(ReadOnlySpan<byte> bytes)
    {
        unchecked
        {
            ulong hash = (ulong)bytes.Length * 0x9E3779B97F4A7C15;
            while (bytes.Length > 8)
            {
                hash = (hash ^ Prefix(bytes)) * 0x9E3779B97F4A7C15;
                hash ^= hash >> 29;
                bytes = bytes[8..];
            }

            hash = (hash ^ Prefix(bytes)) * 0xBF58476D1CE4E5B9;
            return (uint)(hash >> 32);
        }
    }
}
