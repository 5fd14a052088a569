using Dapper;
using Microsoft.Data.Sqlite;

namespace Evenhand.Daemon.Stores.Sqlite;

/// <summary>Opens connections with the settings that durability rests on.</summary>
internal static class SqliteConnections
{
    /// <summary>Opens a file for its one writer: write-ahead log, every commit forced to disk.</summary>
    public static SqliteConnection Writer(string file)
    {
        SqliteConnection connection = Open(file, SqliteOpenMode.ReadWriteCreate);
        connection.ExecuteScalar<string>("PRAGMA journal_mode = WAL");
        connection.Execute("PRAGMA synchronous = FULL; PRAGMA foreign_keys = ON");
        return connection;
    }

    /// <summary>Opens a file for reading, beside its writer.</summary>
    public static SqliteConnection Reader(string file) => Open(file, SqliteOpenMode.ReadOnly);

    private static SqliteConnection Open(string file, SqliteOpenMode mode)
    {
        // Without pooling a closed store is closed: its files can be moved or deleted.
        SqliteConnection connection = new(new SqliteConnectionStringBuilder
        {
            DataSource = file,
            Mode = mode,
            Pooling = false,
            DefaultTimeout = 5,
        }.ToString());
        connection.Open();
        return connection;
    }
}
