using System.Security.Cryptography;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;

namespace Evenhand.Daemon.Sources;

/// <summary>An input of records: newline-delimited JSON, CSV or Parquet, each also compressed by gzip.</summary>
internal abstract class RecordFile : IDisposable
{
    /// <summary>The name without folders; <c>stdin</c> for a pipe.</summary>
    public required string Name { get; init; }

    /// <summary>Length in bytes; null where not known.</summary>
    public abstract long? Length { get; }

    /// <summary>Bytes read so far.</summary>
    public abstract long BytesRead { get; }

    /// <summary>Entries given or skipped so far.</summary>
    public long Position { get; protected set; }

    /// <summary>Event time of records of a charter without <c>time</c>, in microseconds since 1970-01-01T00:00:00Z.</summary>
    public abstract long DefaultTime { get; set; }

    /// <summary>SHA-256 of the raw bytes, lower-case hexadecimal; only once all have been read.</summary>
    public abstract string Sha256 { get; }

    /// <summary>What a person should know of how the input was read; null for nothing.</summary>
    public virtual string? Warning => null;

    /// <summary>Opens an input.</summary>
    /// <param name="path">A file, or <c>-</c> for stdin.</param>
    /// <param name="charter">The charter.</param>
    /// <param name="layout">Its layout.</param>
    /// <param name="hasher">The hash of ids.</param>
    /// <param name="kind">What the records are.</param>
    /// <exception cref="SourceException">It cannot be read.</exception>
    public static RecordFile Open(string path, Charter charter, RecordLayout layout, IdHasher hasher, RecordKind kind)
    {
        string name = path == "-" ? "stdin" : Path.GetFileName(path);
        RawInput raw = RawInput.Open(path, name);
        try
        {
            return Open(raw, path, name, new Decoding(charter, layout, hasher, kind));
        }
        catch
        {
            raw.Dispose();
            throw;
        }
    }

    /// <summary>SHA-256 of a file's bytes, lower-case hexadecimal.</summary>
    /// <exception cref="SourceException">It cannot be read.</exception>
    public static string HashOf(string path)
    {
        using FileStream file = RawInput.OpenFile(path, path);
        try
        {
            return Convert.ToHexStringLower(SHA256.HashData(file));
        }
        catch (IOException e)
        {
            throw new SourceException($"{path}: cannot be read ({e.Message})", e);
        }
    }

    /// <summary>Where an entry stands, for messages: after the file's name.</summary>
    public virtual string PlaceOf(long position) => FormattableString.Invariant($":{position + 1}");

    /// <summary>Adds entries until the batch is full or the input ends; false when there is nothing more.</summary>
    public abstract bool Fill(RecordBatch batch);

    /// <summary>Passes over entries that an earlier run has taken.</summary>
    public abstract void Skip(long entries);

    /// <inheritdoc/>
    public void Dispose()
    {
        Dispose(disposing: true);
        GC.SuppressFinalize(this);
    }

    /// <summary>Closes the input.</summary>
    protected abstract void Dispose(bool disposing);

    private static RecordFile Open(RawInput raw, string path, string name, Decoding decoding)
    {
        ReadOnlySpan<byte> head = raw.Peek(4);
        bool isGzip = head.StartsWith((ReadOnlySpan<byte>)[0x1F, 0x8B]);
        if (!isGzip && name.EndsWith(".gz", StringComparison.OrdinalIgnoreCase))
        {
            throw new SourceException($"{name}: is named .gz but is not compressed by gzip; get the file anew, or rename it");
        }

        string extension = Path.GetExtension(isGzip && name.EndsWith(".gz", StringComparison.OrdinalIgnoreCase) ? name[..^3] : name).ToUpperInvariant();
        Stream content = isGzip ? new GzipContent(raw) : raw;
        return extension switch
        {
            ".NDJSON" or ".JSONL" or ".JSON" => new JsonLinesFile(raw, content, decoding) { Name = name },
            ".CSV" or ".TSV" => new CsvFile(raw, content, decoding, name) { Name = name },
            ".PARQUET" => new ParquetFile(raw, isGzip ? content : null, path, decoding, name) { Name = name },
            _ when head.StartsWith("PAR1"u8) => new ParquetFile(raw, null, path, decoding, name) { Name = name },
            _ when HasColumnsOnly(decoding.Charter) && !IsJson(head) => new CsvFile(raw, content, decoding, name) { Name = name },
            _ when path == "-" || isGzip || IsJson(head) => new JsonLinesFile(raw, content, decoding) { Name = name },
            _ => new CsvFile(raw, content, decoding, name) { Name = name },
        };
    }

    /// <summary>Whether the charter names the decision's place as a column: then what comes without a telling name is a table.</summary>
    private static bool HasColumnsOnly(Charter charter) =>
        (charter.Decision?.At ?? (charter.Inputs.Count > 0 ? charter.Inputs[0].At : null))?.Places.All(p => !p.StartsWith('/')) == true;

    private static bool IsJson(ReadOnlySpan<byte> head) => head.Trim(" \t\r\n\u00EF\u00BB\u00BF"u8).IsEmpty || head.IndexOf((byte)'{') >= 0;
}
