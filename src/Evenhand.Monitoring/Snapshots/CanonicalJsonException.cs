namespace Evenhand.Monitoring.Snapshots;

/// <summary>Says why a document has no canonical form, and where in it the trouble is.</summary>
public sealed class CanonicalJsonException : FormatException
{
    /// <summary>An exception without a place.</summary>
    public CanonicalJsonException()
        : this("The document has no canonical JSON form.")
    {
    }

    /// <summary>An exception with a message that names the place.</summary>
    /// <param name="message">What is wrong and where.</param>
    public CanonicalJsonException(string message)
        : base(message)
    {
    }

    /// <summary>An exception with a message and its cause.</summary>
    /// <param name="message">What is wrong and where.</param>
    /// <param name="innerException">The cause.</param>
    public CanonicalJsonException(string message, Exception innerException)
        : base(message, innerException)
    {
    }
}
