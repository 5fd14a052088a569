using System.Security.Cryptography;

namespace Evenhand.Daemon.Sources;

/// <summary>The raw bytes of an input, hashed and counted as they pass.</summary>
/// <remarks>
/// A file is read up to the length that it had when it was opened: what is appended meanwhile is left out, and a file that turns
/// out shorter was cut while it was read, which is an error.
/// </remarks>
internal sealed class RawInput : Stream
{
    private readonly Stream _inner;
    private readonly IncrementalHash _hash = IncrementalHash.CreateHash(HashAlgorithmName.SHA256);
    private readonly string _name;
    private byte[] _peeked = [];
    private int _peekedAt;
    private string? _sha256;

    private RawInput(Stream inner, string name, long? limit)
    {
        _inner = inner;
        _name = name;
        Limit = limit;
    }

    /// <summary>The length when it was opened; null for a pipe.</summary>
    public long? Limit { get; }

    /// <summary>Bytes read so far.</summary>
    public long BytesRead { get; private set; }

    /// <summary>SHA-256 of all bytes, lower-case hexadecimal; only once all have been read.</summary>
    public string Sha256 => _sha256 ??= Convert.ToHexStringLower(_hash.GetHashAndReset());

    /// <summary>Whether the file has grown since it was opened.</summary>
    public bool HasGrown => Limit is { } limit && _inner.Length > limit;

    public override bool CanRead => true;

    public override bool CanSeek => false;

    public override bool CanWrite => false;

    public override long Length => throw new NotSupportedException();

    public override long Position
    {
        get => BytesRead;
        set => throw new NotSupportedException();
    }

    /// <summary>Opens a file, or stdin for <c>-</c>.</summary>
    public static RawInput Open(string path, string name)
    {
        if (path == "-")
        {
            return new RawInput(Console.OpenStandardInput(), name, limit: null);
        }

        FileStream file = OpenFile(path, name);
        return new RawInput(file, name, file.CanSeek ? file.Length : null);
    }

    /// <summary>Opens a file for reading while others may write to it.</summary>
    public static FileStream OpenFile(string path, string name)
    {
        if (Directory.Exists(path))
        {
            throw new SourceException($"{name}: is a folder; name the files in it");
        }

        try
        {
            return new FileStream(path, FileMode.Open, FileAccess.Read, FileShare.ReadWrite | FileShare.Delete, bufferSize: 0, FileOptions.SequentialScan);
        }
        catch (Exception e) when (e is FileNotFoundException or DirectoryNotFoundException)
        {
            throw new SourceException($"{path}: no such file; check the name", e);
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException)
        {
            throw new SourceException($"{path}: cannot be read ({e.Message}); check its permissions", e);
        }
    }

    /// <summary>The first bytes, without taking them.</summary>
    public ReadOnlySpan<byte> Peek(int count)
    {
        byte[] bytes = new byte[count];
        int length = 0, read;
        do
        {
            read = ReadInner(bytes.AsSpan(length));
            length += read;
        }
        while (read > 0 && length < count);
        _peeked = bytes[..length];
        return _peeked;
    }

    /// <summary>Reads what is left, so that the hash covers all of it.</summary>
    public void Drain()
    {
        Span<byte> rest = stackalloc byte[4096];
        while (Read(rest) > 0)
        {
        }
    }

    public override int Read(Span<byte> buffer)
    {
        int read;
        if (_peekedAt < _peeked.Length)
        {
            read = Math.Min(buffer.Length, _peeked.Length - _peekedAt);
            _peeked.AsSpan(_peekedAt, read).CopyTo(buffer);
            _peekedAt += read;
        }
        else
        {
            read = ReadInner(buffer);
        }

        _hash.AppendData(buffer[..read]);
        BytesRead += read;
        if (read == 0 && buffer.Length > 0 && Limit is { } limit && BytesRead < limit)
        {
            throw new SourceException($"{_name}: was cut while it was read: {BytesRead:N0} of {limit:N0} bytes; read it again when nothing writes to it any more");
        }

        return read;
    }

    public override int Read(byte[] buffer, int offset, int count) => Read(buffer.AsSpan(offset, count));

    public override void Flush()
    {
    }

    public override long Seek(long offset, SeekOrigin origin) => throw new NotSupportedException();

    public override void SetLength(long value) => throw new NotSupportedException();

    public override void Write(byte[] buffer, int offset, int count) => throw new NotSupportedException();

    protected override void Dispose(bool disposing)
    {
        if (disposing)
        {
            _inner.Dispose();
            _hash.Dispose();
        }

        base.Dispose(disposing);
    }

    private int ReadInner(Span<byte> buffer)
    {
        if (Limit is { } limit)
        {
            long left = limit - BytesRead - (_peeked.Length - _peekedAt);
            buffer = buffer[..(int)Math.Min(buffer.Length, left)];
        }

        try
        {
            return buffer.IsEmpty ? 0 : _inner.Read(buffer);
        }
        catch (IOException e)
        {
            throw new SourceException($"{_name}: cannot be read any further after {BytesRead:N0} bytes ({e.Message})", e);
        }
    }
}
