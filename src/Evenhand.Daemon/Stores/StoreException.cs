namespace Evenhand.Daemon.Stores;

/// <summary>The store cannot do what was asked: missing, full, damaged, of another version. The message is one line that a person can act on.</summary>
internal class StoreException : Exception
{
    /// <summary>Says what is wrong and how to mend it.</summary>
    public StoreException(string message)
        : base(message)
    {
    }

    /// <summary>Says what is wrong and how to mend it, with the cause.</summary>
    public StoreException(string message, Exception? innerException)
        : base(message, innerException)
    {
    }

    /// <summary>Whether the same call can succeed later without anybody mending the store.</summary>
    public bool CanRetry { get; init; }

    /// <summary>Whether the stored bytes themselves are damaged.</summary>
    public bool IsDamage { get; init; }
}
