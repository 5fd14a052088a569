using Evenhand.Daemon.Stores;

namespace Evenhand.Daemon.Commands;

/// <summary>Opens the store that <c>--store</c> names.</summary>
internal static class StoreOption
{
    /// <summary>Opens a store for writing.</summary>
    /// <exception cref="CommandFailure">Not the URL of a store that this version knows.</exception>
    public static IStore Open(string url) => Parse(url).Open();

    /// <summary>Opens a store for reading.</summary>
    /// <exception cref="CommandFailure">Not the URL of a store that this version knows.</exception>
    public static IEvidenceStore OpenReadOnly(string url) => Parse(url).OpenReadOnly();

    /// <summary>The files that a store keeps; none without one.</summary>
    /// <exception cref="CommandFailure">Not the URL of a store that this version knows.</exception>
    public static IEnumerable<string> FilesOf(string? url)
    {
        string? file = url is null ? null : Parse(url).File;
        return file is null ? [] : [file, file + "-wal", file + "-shm", file + "-lock", file + "-journal"];
    }

    private static StoreUrl Parse(string url)
    {
        try
        {
            return StoreUrl.Parse(url);
        }
        catch (FormatException e)
        {
            throw new CommandFailure(2, e.Message);
        }
    }
}
