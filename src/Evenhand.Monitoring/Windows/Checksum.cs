using System.Security.Cryptography;

namespace Evenhand.Monitoring.Windows;

/// <summary>The first 8 bytes of a SHA-256 (FIPS 180-4): shows that stored bytes are damaged, not that somebody changed them.</summary>
internal static class Checksum
{
    /// <summary>Bytes of a checksum.</summary>
    public const int Length = 8;

    /// <summary>Writes the checksum of some bytes.</summary>
    /// <param name="bytes">The bytes.</param>
    /// <param name="to">At least <see cref="Length"/> bytes.</param>
    public static void Write(ReadOnlySpan<byte> bytes, Span<byte> to)
    {
        Span<byte> hash = stackalloc byte[SHA256.HashSizeInBytes];
        SHA256.HashData(bytes, hash);
        hash[..Length].CopyTo(to);
    }

    /// <summary>Whether the last bytes are the checksum of those before them.</summary>
    public static bool Holds(ReadOnlySpan<byte> stored)
    {
        if (stored.Length < Length)
        {
            return false;
        }

        Span<byte> checksum = stackalloc byte[Length];
        Write(stored[..^Length], checksum);
        return checksum.SequenceEqual(stored[^Length..]);
    }
}
