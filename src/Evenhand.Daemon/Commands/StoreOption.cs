using Evenhand.Daemon.Stores;

namespace Evenhand.Daemon.Commands;

/// <summary>Opens the store that <c>--store</c> names.</summary>
internal static class StoreOption
{
    /// <summary>Opens a store for writing.</summary>
    public static IStore Open(string url) => throw new CommandFailure(2, url);
}
