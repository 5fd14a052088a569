namespace Evenhand.Daemon.Sources;

/// <summary>Reads content that may be compressed, and says in one line when it is damaged.</summary>
internal static class ContentReader
{
    /// <summary>Reads; 0 at the end.</summary>
    /// <exception cref="SourceException">The compressed data is damaged or cut.</exception>
    public static int Read(Stream content, Span<byte> buffer, string name)
    {
        try
        {
            return content.Read(buffer);
        }
        catch (Exception e) when (e is InvalidDataException or EndOfStreamException)
        {
            throw Damaged(name, e);
        }
    }

    /// <summary>The exception for damaged compressed data.</summary>
    public static SourceException Damaged(string name, Exception cause) =>
        new($"{name}: the compressed data is damaged or cut ({cause.Message.TrimEnd('.')}); get the file anew", cause);
}
