using Evenhand.Monitoring.Records;

namespace Evenhand.Daemon.Sources;

/// <summary>Newline-delimited JSON: one record a line, the last with or without a line end.</summary>
internal sealed class JsonLinesFile : RecordFile
{
    // Twice the longest record: whatever does not fit is too long.
    private const int BufferLength = 2 * JsonRecordDecoder.MaximumLength;

    private static readonly byte[] ByteOrderMark = [0xEF, 0xBB, 0xBF];

    private readonly RawInput _raw;
    private readonly Stream _content;
    private readonly JsonRecordDecoder _decoder;
    private readonly byte[] _buffer = new byte[BufferLength];
    private int _start;
    private int _end;
    private bool _isEnded;
    private bool _isFirst = true;

    public JsonLinesFile(RawInput raw, Stream content, Decoding decoding)
    {
        _raw = raw;
        _content = content;
        _decoder = new JsonRecordDecoder(decoding.Charter, decoding.Layout, decoding.Hasher, decoding.Kind);
    }

    public override long? Length => _raw.Limit;

    public override long BytesRead => _raw.BytesRead;

    public override long DefaultTime
    {
        get => _decoder.DefaultTime;
        set => _decoder.DefaultTime = value;
    }

    public override string Sha256 => _raw.Sha256;

    public override string? Warning => _raw.HasGrown
        ? $"{Name} grew while it was read: the first {_raw.Limit:N0} bytes were used"
        : null;

    public override bool Fill(RecordBatch batch)
    {
        while (!batch.IsFull)
        {
            if (!NextLine(out ReadOnlySpan<byte> line, out bool isTooLong))
            {
                return false;
            }

            if (isTooLong)
            {
                batch.Reject(RejectReason.TooLong, Position);
            }
            else
            {
                _decoder.Decode(line, batch, Position);
            }

            Position++;
        }

        return true;
    }

    public override void Skip(long entries)
    {
        for (long i = 0; i < entries; i++, Position++)
        {
            if (!NextLine(out _, out _))
            {
                throw new SourceException($"{Name}: has fewer records than the unfinished run had read; it was changed since");
            }
        }
    }

    protected override void Dispose(bool disposing)
    {
        if (disposing)
        {
            _content.Dispose();
            _raw.Dispose();
        }
    }

    private bool NextLine(out ReadOnlySpan<byte> line, out bool isTooLong)
    {
        isTooLong = false;
        int scanned = _start;
        while (true)
        {
            int found = _buffer.AsSpan(scanned, _end - scanned).IndexOf((byte)'\n');
            if (found >= 0)
            {
                line = Trimmed(_buffer.AsSpan(_start, scanned + found - _start));
                _start = scanned + found + 1;
                return true;
            }

            if (_isEnded)
            {
                line = Trimmed(_buffer.AsSpan(_start, _end - _start));
                bool isThere = _start < _end || isTooLong;
                _start = _end;
                return isThere;
            }

            if (_end - _start >= BufferLength)
            {
                // The rest of the line is passed over without keeping it.
                isTooLong = true;
                _start = _end;
            }

            scanned = ReadMore(_end - _start);
        }
    }

    /// <summary>Moves what is left to the front and reads behind it; the place from which to look on.</summary>
    private int ReadMore(int left)
    {
        _buffer.AsSpan(_start, left).CopyTo(_buffer);
        _start = 0;
        _end = left;
        int read = ContentReader.Read(_content, _buffer.AsSpan(_end), Name);
        if (read == 0)
        {
            _isEnded = true;
            _raw.Drain();
        }

        _end += read;
        return left;
    }

    private ReadOnlySpan<byte> Trimmed(ReadOnlySpan<byte> line)
    {
        if (_isFirst)
        {
            _isFirst = false;
            line = line.StartsWith(ByteOrderMark) ? line[ByteOrderMark.Length..] : line;
        }

        return line.Length > 0 && line[^1] == (byte)'\r' ? line[..^1] : line;
    }
}
