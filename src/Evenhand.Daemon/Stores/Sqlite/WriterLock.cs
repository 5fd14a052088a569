namespace Evenhand.Daemon.Stores.Sqlite;

/// <summary>Holds a store for one writer: the file <c>FILE-lock</c> beside the database, locked for as long as the process lives.</summary>
/// <remarks>
/// The lock is the operating system's, so that it ends with its process however that ends; the file itself stays, since
/// deleting it would let a third process lock a new file while a second still holds the old one. Where a file system knows no
/// such locks, epochs and expected offsets still stop the second writer of a run.
/// </remarks>
internal sealed class WriterLock : IDisposable
{
    private readonly FileStream _held;

    private WriterLock(FileStream held) => _held = held;

    /// <summary>Takes the lock.</summary>
    /// <exception cref="StoreHeldException">Another process, or another store of this one, has it.</exception>
    /// <exception cref="StoreException">The lock file cannot be written.</exception>
    public static WriterLock Take(string file)
    {
        string path = file + "-lock";
        try
        {
            return new WriterLock(new FileStream(path, FileMode.OpenOrCreate, FileAccess.ReadWrite, FileShare.None));
        }
        catch (DirectoryNotFoundException e)
        {
            throw new StoreException($"store sqlite:{file}: the folder {Path.GetDirectoryName(Path.GetFullPath(file))} does not exist; make it or name another", e);
        }
        catch (UnauthorizedAccessException e)
        {
            throw new StoreException($"store sqlite:{file}: {path} cannot be written; check the rights on the folder", e);
        }
        catch (IOException e) when (IsLocked(path))
        {
            throw new StoreHeldException($"store sqlite:{file}: another process writes to it; wait for that or stop it, then run again", e);
        }
        catch (IOException e)
        {
            throw new StoreException($"store sqlite:{file}: {path} cannot be opened ({e.Message})", e);
        }
    }

    /// <inheritdoc/>
    public void Dispose() => _held.Dispose();

    // A lock that is held shows itself by letting no one else open the file, while a missing or forbidden file would not be there or not readable.
    private static bool IsLocked(string path)
    {
        try
        {
            using FileStream probe = new(path, FileMode.Open, FileAccess.ReadWrite, FileShare.None);
            return true;
        }
        catch (IOException)
        {
            return File.Exists(path) && !Directory.Exists(path);
        }
        catch (UnauthorizedAccessException)
        {
            return false;
        }
    }
}
