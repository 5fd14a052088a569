namespace Evenhand.Monitoring.Windows;

/// <summary>Stored state that cannot be read: damaged, or written in a format this version does not know. A retry does not help.</summary>
public sealed class StoredStateException : Exception
{
    /// <summary>An exception without a message.</summary>
    public StoredStateException()
    {
    }

    /// <summary>Says what is wrong and how to mend it.</summary>
    public StoredStateException(string message)
        : base(message)
    {
    }

    /// <summary>Says what is wrong and how to mend it, with the cause.</summary>
    public StoredStateException(string message, Exception innerException)
        : base(message, innerException)
    {
    }
}
