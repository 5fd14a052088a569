using System.Buffers.Binary;
using System.Numerics;

namespace Evenhand.Monitoring.Records;

/// <summary>
/// Keyed hash of record ids: SipHash-2-4 with 128 bits of output (J.-P. Aumasson, D. J. Bernstein, "SipHash: a fast
/// short-input PRF", INDOCRYPT 2012; the longer output is defined in the authors' reference implementation).
/// </summary>
/// <remarks>
/// Whoever lacks the key cannot find out an id from its hash by trying ids. Instances are immutable and may be shared.
/// <see cref="IdHash.High"/> holds output bytes 0–7 and <see cref="IdHash.Low"/> bytes 8–15, each read little-endian.
/// </remarks>
public sealed class IdHasher
{
    /// <summary>Bytes of a key.</summary>
    public const int KeyLength = 16;

    /// <summary>The byte between an id and its revision: ASCII's unit separator.</summary>
    public const byte Separator = 0x1F;

    private const int StackLimit = 512;

    private readonly ulong _k0;
    private readonly ulong _k1;

    /// <summary>Takes a key.</summary>
    /// <param name="key">Exactly 16 bytes.</param>
    /// <exception cref="ArgumentException">The key has another length.</exception>
    public IdHasher(ReadOnlySpan<byte> key)
    {
        if (key.Length != KeyLength)
        {
            throw new ArgumentException($"The key of the id hash has {key.Length} bytes; it needs {KeyLength}.", nameof(key));
        }

        _k0 = BinaryPrimitives.ReadUInt64LittleEndian(key);
        _k1 = BinaryPrimitives.ReadUInt64LittleEndian(key[8..]);
    }

    /// <summary>The hash of an id's UTF-8 text.</summary>
    public IdHash Hash(ReadOnlySpan<byte> id)
    {
        unchecked
        {
            ulong v0 = _k0 ^ 0x736f6d6570736575;
            ulong v1 = _k1 ^ 0x646f72616e646f6d ^ 0xee;
            ulong v2 = _k0 ^ 0x6c7967656e657261;
            ulong v3 = _k1 ^ 0x7465646279746573;
            ulong last = (ulong)id.Length << 56;
            while (id.Length >= 8)
            {
                Absorb(BinaryPrimitives.ReadUInt64LittleEndian(id), ref v0, ref v1, ref v2, ref v3);
                id = id[8..];
            }

            Absorb(last | Packed.Prefix(id), ref v0, ref v1, ref v2, ref v3);
            v2 ^= 0xee;
            ulong high = Squeeze(ref v0, ref v1, ref v2, ref v3);
            v1 ^= 0xdd;
            return new IdHash(high, Squeeze(ref v0, ref v1, ref v2, ref v3));
        }
    }

    /// <summary>The hash of an id and its revision, as the bytes of the id, <see cref="Separator"/> and the bytes of the revision.</summary>
    /// <param name="id">UTF-8.</param>
    /// <param name="revision">UTF-8; empty where the record has none.</param>
    public IdHash Hash(ReadOnlySpan<byte> id, ReadOnlySpan<byte> revision)
    {
        int length = id.Length + 1 + revision.Length;
        Span<byte> joined = length <= StackLimit ? stackalloc byte[StackLimit] : new byte[length];
        id.CopyTo(joined);
        joined[id.Length] = Separator;
        revision.CopyTo(joined[(id.Length + 1)..]);
        return Hash(joined[..length]);
    }

    private static void Absorb(ulong word, ref ulong v0, ref ulong v1, ref ulong v2, ref ulong v3)
    {
        v3 ^= word;
        Round(ref v0, ref v1, ref v2, ref v3);
        Round(ref v0, ref v1, ref v2, ref v3);
        v0 ^= word;
    }

    private static ulong Squeeze(ref ulong v0, ref ulong v1, ref ulong v2, ref ulong v3)
    {
        for (int round = 0; round < 4; round++)
        {
            Round(ref v0, ref v1, ref v2, ref v3);
        }

        return v0 ^ v1 ^ v2 ^ v3;
    }

    private static void Round(ref ulong v0, ref ulong v1, ref ulong v2, ref ulong v3)
    {
        unchecked
        {
            v0 += v1;
            v2 += v3;
            v1 = BitOperations.RotateLeft(v1, 13) ^ v0;
            v3 = BitOperations.RotateLeft(v3, 16) ^ v2;
            v0 = BitOperations.RotateLeft(v0, 32);
            v2 += v1;
            v0 += v3;
            v1 = BitOperations.RotateLeft(v1, 17) ^ v2;
            v3 = BitOperations.RotateLeft(v3, 21) ^ v0;
            v2 = BitOperations.RotateLeft(v2, 32);
        }
    }
}
