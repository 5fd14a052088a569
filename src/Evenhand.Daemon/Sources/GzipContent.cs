using System.IO.Compression;

namespace Evenhand.Daemon.Sources;

/// <summary>What a gzip file holds (RFC 1952), all its members one after the other; anything else behind a member is an error.</summary>
/// <remarks>
/// <para>The platform's stream stops at the first byte that begins no member and calls that the end, so that a member with a
/// damaged head would be left out without a word. It takes no more input then: whatever it leaves unread shows that. Zero
/// bytes behind the last member are padding, as they are to other readers of the format.</para>
/// <para>That a member is whole (its end, checksum and length) is checked by the platform, told so by the switch
/// <c>System.IO.Compression.UseStrictValidation</c> in the project file.</para>
/// </remarks>
internal sealed class GzipContent : Stream
{
    private readonly HeldBackTail _input;
    private readonly GZipStream _members;

    public GzipContent(Stream input)
    {
        _input = new HeldBackTail(input);
        _members = new GZipStream(_input, CompressionMode.Decompress, leaveOpen: true);
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

    /// <summary>Reads; 0 at the end.</summary>
    /// <exception cref="InvalidDataException">The compressed data is damaged or cut.</exception>
    public override int Read(Span<byte> buffer)
    {
        int read = _members.Read(buffer);
        if (read == 0 && !buffer.IsEmpty && _input.HasMoreThanPadding())
        {
            throw new InvalidDataException("something that is not gzip follows a member.");
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
            _members.Dispose();
            _input.Dispose();
        }

        base.Dispose(disposing);
    }
}
