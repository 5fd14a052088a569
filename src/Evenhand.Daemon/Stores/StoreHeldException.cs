namespace Evenhand.Daemon.Stores;

/// <summary>Another process writes to the store; it has one writer at a time.</summary>
internal sealed class StoreHeldException : StoreException
{
    /// <summary>Names the holder and what to do.</summary>
    public StoreHeldException(string message)
        : base(message) => CanRetry = true;

    /// <summary>Names the holder and what to do, with the cause.</summary>
    public StoreHeldException(string message, Exception innerException)
        : base(message, innerException) => CanRetry = true;
}
