using System.Text;
using System.Text.Json;
using System.Text.Json.Serialization;

namespace Evenhand.Monitoring.Windows;

/// <summary>The small part of a shard's state: <c>evenhand-shard/1</c>, see <c>bucket-format.md</c>.</summary>
public sealed record ShardHeader
{
    /// <summary>The format's name and version.</summary>
    public const string CurrentFormat = "evenhand-shard/1";

    private const string CheckStart = ",\"check\":\"";

    /// <summary>The format's name and version.</summary>
    public string Format { get; init; } = CurrentFormat;

    /// <summary>Entries taken from each input so far, in input order.</summary>
    public required IReadOnlyList<long> NextOffsets { get; init; }

    /// <summary>Whether each input has been read to its end, in input order.</summary>
    public required IReadOnlyList<bool> Ended { get; init; }

    /// <summary>The newest event time used, in microseconds; null before the first.</summary>
    public long? Newest { get; init; }

    /// <summary>The oldest event time used, in microseconds; null before the first.</summary>
    public long? Oldest { get; init; }

    /// <summary>Values with sums of their own, by slice field.</summary>
    public required IReadOnlyList<IReadOnlyList<string>> Slices { get; init; }

    /// <summary>What became of the records.</summary>
    public required ShardCounts Counts { get; init; }

    /// <summary>The header as UTF-8 JSON, its last member a checksum over the object without it.</summary>
    public byte[] ToBytes()
    {
        byte[] json = JsonSerializer.SerializeToUtf8Bytes(this, ShardHeaderJson.Default.ShardHeader);
        return [.. json.AsSpan(..^1), .. CheckMember(json)];
    }

    /// <summary>Reads a header.</summary>
    /// <exception cref="StoredStateException">Not this format, or damaged.</exception>
    public static ShardHeader FromBytes(ReadOnlySpan<byte> utf8)
    {
        byte[] json = utf8.Length > CheckLength ? [.. utf8[..^CheckLength], (byte)'}'] : [];
        if (!utf8.EndsWith(CheckMember(json)))
        {
            throw new StoredStateException("a stored shard fails its checksum: the store is damaged; restore it, or replay into an empty one");
        }

        try
        {
            ShardHeader? header = JsonSerializer.Deserialize(json, ShardHeaderJson.Default.ShardHeader);
            return header is { Format: CurrentFormat } && header.Counts.ByReason.Length == Records.RejectReasonNames.Count
                ? header
                : throw new StoredStateException("a stored shard has an unknown format");
        }
        catch (JsonException e)
        {
            throw new StoredStateException("a stored shard is damaged", e);
        }
    }

    private static int CheckLength => CheckStart.Length + (2 * Checksum.Length) + 2;

    /// <summary>What stands behind the last member of an object: its checksum, and the end of the object.</summary>
    private static byte[] CheckMember(ReadOnlySpan<byte> json)
    {
        Span<byte> checksum = stackalloc byte[Checksum.Length];
        Checksum.Write(json, checksum);
        return Encoding.UTF8.GetBytes($"{CheckStart}{Convert.ToHexStringLower(checksum)}\"}}");
    }
}

[JsonSerializable(typeof(ShardHeader))]
[JsonSourceGenerationOptions(PropertyNamingPolicy = JsonKnownNamingPolicy.SnakeCaseLower)]
internal sealed partial class ShardHeaderJson : JsonSerializerContext;
