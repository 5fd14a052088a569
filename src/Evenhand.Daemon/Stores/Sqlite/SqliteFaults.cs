using Microsoft.Data.Sqlite;
using static SQLitePCL.raw;

namespace Evenhand.Daemon.Stores.Sqlite;

/// <summary>SQLite's errors in words that a person can act on.</summary>
internal static class SqliteFaults
{
    /// <summary>Runs a piece of work on a database file.</summary>
    /// <exception cref="StoreException">The work failed in SQLite.</exception>
    public static T Run<T>(string file, Func<T> work)
    {
        try
        {
            return work();
        }
        catch (SqliteException e)
        {
            throw Translate(file, e);
        }
    }

    /// <summary>Runs a piece of work on a database file.</summary>
    /// <exception cref="StoreException">The work failed in SQLite.</exception>
    public static void Run(string file, Action work) => Run(file, () =>
    {
        work();
        return true;
    });

    /// <summary>What an error means for a store.</summary>
    public static StoreException Translate(string file, SqliteException e) => e.SqliteErrorCode switch
    {
        SQLITE_BUSY or SQLITE_LOCKED => new StoreHeldException(
            $"store sqlite:{file}: another program keeps the file locked; close it and try again", e),
        SQLITE_FULL => new StoreException(
            $"store sqlite:{file}: no room left to write; nothing of the last commit was stored. Make room and run again: it goes on from there", e)
        {
            CanRetry = true,
        },
        SQLITE_NOTADB => new StoreException($"store sqlite:{file}: not a SQLite database; name another file, or restore this one from a backup", e)
        {
            IsDamage = true,
        },
        SQLITE_CORRUPT => Damage(file, e.Message, e),
        SQLITE_CANTOPEN => new StoreException($"store sqlite:{file}: cannot be opened; check that its folder exists and may be written", e),
        SQLITE_READONLY or SQLITE_PERM => new StoreException($"store sqlite:{file}: cannot be written; check the rights on the file and its folder", e),
        SQLITE_IOERR => new StoreException($"store sqlite:{file}: the disk failed ({Words(e)}); check it and run again", e) { CanRetry = true },
        _ => new StoreException($"store sqlite:{file}: {Words(e)}", e),
    };

    /// <summary>The file's own structure is damaged.</summary>
    public static StoreException Damage(string file, string found, Exception? cause = null) =>
        new($"store sqlite:{file}: the file is damaged ({Words(found)}); restore it from a backup, or replay into an empty one", cause) { IsDamage = true };

    private static string Words(SqliteException e) => Words(e.Message);

    // SQLite quotes statements as they stand, line ends and all.
    private static string Words(string message) => string.Join(' ', message.Split((char[]?)null, StringSplitOptions.RemoveEmptyEntries));
}
