namespace Evenhand.Daemon.Sources;

/// <summary>An input that cannot be read; the message is one line that names it and says how to mend it. A retry does not help unless the input changes.</summary>
internal sealed class SourceException : Exception
{
    public SourceException(string message)
        : base(message)
    {
    }

    public SourceException(string message, Exception cause)
        : base(message, cause)
    {
    }
}
