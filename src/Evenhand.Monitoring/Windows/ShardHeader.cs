using System.Text.Json;
using System.Text.Json.Serialization;

namespace Evenhand.Monitoring.Windows;

/// <summary>The small part of a shard's state: <c>evenhand-shard/1</c>, see <c>bucket-format.md</c>.</summary>
public sealed record ShardHeader
{
    /// <summary>The format's name and version.</summary>
    public const string CurrentFormat = "evenhand-shard/1";

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

    /// <summary>The header as UTF-8 JSON.</summary>
    public byte[] ToBytes() => JsonSerializer.SerializeToUtf8Bytes(this, ShardHeaderJson.Default.ShardHeader);

    /// <summary>Reads a header.</summary>
    /// <exception cref="StoredStateException">Not this format.</exception>
    public static ShardHeader FromBytes(ReadOnlySpan<byte> utf8)
    {
        try
        {
            ShardHeader? header = JsonSerializer.Deserialize(utf8, ShardHeaderJson.Default.ShardHeader);
            return header is { Format: CurrentFormat } && header.Counts.ByReason.Length == Records.RejectReasonNames.Count
                ? header
                : throw new StoredStateException("a stored shard has an unknown format");
        }
        catch (JsonException e)
        {
            throw new StoredStateException("a stored shard is damaged", e);
        }
    }
}

[JsonSerializable(typeof(ShardHeader))]
[JsonSourceGenerationOptions(PropertyNamingPolicy = JsonKnownNamingPolicy.SnakeCaseLower)]
internal sealed partial class ShardHeaderJson : JsonSerializerContext;
