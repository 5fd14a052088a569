using Dapper;
using Evenhand.Daemon.Stores;
using Evenhand.Daemon.Stores.Sqlite;
using Microsoft.Data.Sqlite;

namespace Evenhand.Daemon.Tests.Stores;

/// <summary>A SQLite store in a folder of its own.</summary>
internal sealed class SqlitePlace : IStorePlace
{
    private readonly string _folder = Directory.CreateTempSubdirectory("evenhand-store").FullName;

    /// <summary>The database file; it is there once the store has been opened.</summary>
    public string DatabaseFile => Path.Combine(_folder, "evidence.db");

    /// <inheritdoc/>
    public IStore Open() => SqliteStore.Open(DatabaseFile);

    /// <inheritdoc/>
    public IEvidenceStore OpenReadOnly() => SqliteEvidence.Open(DatabaseFile);

    /// <inheritdoc/>
    public void Execute(string sql)
    {
        using SqliteConnection connection = SqliteConnections.Writer(DatabaseFile);
        connection.Execute(sql);
    }

    /// <summary>Asks for one value past the program.</summary>
    public T Scalar<T>(string sql)
    {
        using SqliteConnection connection = SqliteConnections.Writer(DatabaseFile);
        return connection.ExecuteScalar<T>(sql)!;
    }

    public void Dispose() => Directory.Delete(_folder, recursive: true);
}
