using Evenhand.Daemon.Sources;

namespace Evenhand.Daemon.Evidence;

/// <summary>The chain in an exported file, one document a line.</summary>
internal sealed class FileEvidence : IEvidenceSource
{
    private readonly byte[] _bytes;

    private FileEvidence(string name, byte[] bytes)
    {
        Name = name;
        _bytes = bytes;
    }

    /// <inheritdoc/>
    public string Name { get; }

    /// <summary>Reads an exported file.</summary>
    /// <exception cref="SourceException">It cannot be read.</exception>
    public static FileEvidence Open(string path)
    {
        try
        {
            return new FileEvidence(path, File.ReadAllBytes(path));
        }
        catch (Exception e) when (e is FileNotFoundException or DirectoryNotFoundException)
        {
            throw new SourceException($"{path}: no such file; check the name", e);
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException)
        {
            throw new SourceException($"{path}: cannot be read ({e.Message}); check that it is a file and its permissions", e);
        }
    }

    /// <inheritdoc/>
    public IEnumerable<byte[]> Documents()
    {
        int start = 0;
        while (start < _bytes.Length)
        {
            int end = Array.IndexOf(_bytes, (byte)'\n', start);
            end = end < 0 ? _bytes.Length : end;
            yield return _bytes[start..end];
            start = end + 1;
        }
    }

    /// <inheritdoc/>
    public byte[]? Document(long sequence) => Documents().FirstOrDefault(d => DocumentJson.Whole(DocumentJson.TryParse(d), "sequence") == sequence);

    /// <inheritdoc/>
    public IEnumerable<string> OtherFaults() => [];

    /// <inheritdoc/>
    public void Dispose()
    {
    }
}
