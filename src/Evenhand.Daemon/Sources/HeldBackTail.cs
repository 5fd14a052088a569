namespace Evenhand.Daemon.Sources;

/// <summary>Gives the last bytes of a stream one at a time, so that a reader who needs no more of them leaves them unread.</summary>
/// <remarks>A reader that stops anywhere before its last byte but one leaves something: either the tail, or the rest of it.</remarks>
internal sealed class HeldBackTail : Stream
{
    private const int TailLength = 64;
    private const int BufferLength = 1 << 16;

    private readonly Stream _inner;
    private readonly byte[] _buffer = new byte[BufferLength];
    private int _start;
    private int _end;
    private bool _isEnded;

    public HeldBackTail(Stream inner)
    {
        _inner = inner;
    }

    public override bool CanRead => true;

    public override bool CanSeek => false;

    public override bool CanWrite => false;

    public override long Length => throw new NotSupportedException();

    public override long Position
    {
        get => throw new NotSupportedException();
        set => throw new NotSupportedException();
    }

    public override int Read(Span<byte> buffer)
    {
        ReadAhead();
        int free = _end - _start - TailLength;
        int given = Math.Min(buffer.Length, free > 0 ? free : Math.Min(1, _end - _start));
        _buffer.AsSpan(_start, given).CopyTo(buffer);
        _start += given;
        return given;
    }

    public override int Read(byte[] buffer, int offset, int count) => Read(buffer.AsSpan(offset, count));

    /// <summary>Whether anything but zero bytes has not been read; reads to the end to find out.</summary>
    public bool HasMoreThanPadding()
    {
        bool found = false;
        do
        {
            ReadAhead();
            found |= _buffer.AsSpan(_start, _end - _start).ContainsAnyExcept((byte)0);
            _start = _end;
        }
        while (!_isEnded);
        return found;
    }

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
        }

        base.Dispose(disposing);
    }

    /// <summary>Sees to it that more than the tail is at hand, unless the stream ends before.</summary>
    private void ReadAhead()
    {
        if (_isEnded || _end - _start > TailLength)
        {
            return;
        }

        _buffer.AsSpan(_start, _end - _start).CopyTo(_buffer);
        (_start, _end) = (0, _end - _start);
        while (!_isEnded && _end <= TailLength)
        {
            int read = _inner.Read(_buffer.AsSpan(_end));
            _end += read;
            _isEnded = read == 0;
        }
    }
}
