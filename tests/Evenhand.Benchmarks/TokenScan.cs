using System.Text.Json;

namespace Evenhand.Benchmarks;

/// <summary>The yardstick: a file's lines found in blocks of 1 MiB and each read to its last JSON token; nothing is done with the tokens.</summary>
internal static class TokenScan
{
    /// <summary>Number of tokens in a file.</summary>
    public static long Count(string file)
    {
        using FileStream stream = new(file, FileMode.Open, FileAccess.Read, FileShare.Read, bufferSize: 0);
        byte[] buffer = new byte[1 << 20];
        int kept = 0, read;
        long tokens = 0;
        while ((read = stream.Read(buffer, kept, buffer.Length - kept)) > 0)
        {
            ReadOnlySpan<byte> block = buffer.AsSpan(0, kept + read);
            int end;
            while ((end = block.IndexOf((byte)'\n')) >= 0)
            {
                Utf8JsonReader reader = new(block[..end]);
                while (reader.Read())
                {
                    tokens++;
                }

                block = block[(end + 1)..];
            }

            kept = block.Length;
            block.CopyTo(buffer);
        }

        return tokens;
    }
}
