using Dapper;
using Microsoft.Data.Sqlite;

namespace Evenhand.Daemon.Stores.Sqlite;

/// <summary>Reads the chain and what runs left beside it.</summary>
internal class SqliteEvidence : IEvidenceStore
{
    private static readonly string[] Guards =
        ["snapshot_no_update", "snapshot_no_delete", "snapshot_follows", "chain_head_no_delete", "chain_head_follows"];

    /// <summary>Reads over an open connection, which it closes in the end.</summary>
    protected SqliteEvidence(string file, SqliteConnection connection)
    {
        File = file;
        Connection = connection;
    }

    /// <summary>The database file.</summary>
    protected string File { get; }

    /// <summary>The connection.</summary>
    protected internal SqliteConnection Connection { get; }

    /// <summary>Opens a store for reading.</summary>
    /// <exception cref="StoreException">There is none, or it cannot be read.</exception>
    public static SqliteEvidence Open(string file)
    {
        if (!System.IO.File.Exists(file))
        {
            throw new StoreException($"store sqlite:{file}: no such store; check the name");
        }

        return SqliteFaults.Run(file, () =>
        {
            SqliteConnection connection = SqliteConnections.Reader(file);
            try
            {
                // One view for as long as it is open: a snapshot that is appended meanwhile must not look like a broken chain.
                connection.BeginTransaction(deferred: true);
                SqliteSchema.RefuseNewer(connection, file);
                return connection.ExecuteScalar<long>("SELECT count(*) FROM sqlite_master WHERE name = 'snapshot'") == 0
                    ? throw new StoreException($"store sqlite:{file}: holds no chain; check the name")
                    : new SqliteEvidence(file, connection);
            }
            catch
            {
                connection.Dispose();
                throw;
            }
        });
    }

    /// <inheritdoc/>
    public ChainHead Head() => Run(() => StoredHead());

    /// <inheritdoc/>
    public IReadOnlyList<SnapshotEntry> Snapshots() => Run(() => (IReadOnlyList<SnapshotEntry>)[.. Connection.Query<SnapshotRow>(
        """
        SELECT sequence AS Sequence, kind AS Kind, charter AS Charter, as_of AS AsOf, created_at AS CreatedAt,
               previous_sha256 AS PreviousSha256, sha256 AS Sha256, length(document) AS Size
        FROM snapshot ORDER BY sequence
        """).Select(r => r.Entry)]);

    /// <inheritdoc/>
    public byte[]? Snapshot(long sequence) =>
        Run(() => Connection.QuerySingleOrDefault<byte[]>("SELECT document FROM snapshot WHERE sequence = @sequence", new { sequence }));

    /// <inheritdoc/>
    public IReadOnlyList<string> MissingGuards() => Run(() =>
    {
        HashSet<string> there = [.. Connection.Query<string>("SELECT name FROM sqlite_master WHERE type = 'trigger'")];
        return (IReadOnlyList<string>)[.. Guards.Where(g => !there.Contains(g))];
    });

    /// <inheritdoc/>
    public IReadOnlyList<RunEntry> Runs() => Run(() =>
        Connection.Query<RunEntry>("SELECT identity AS Identity, charter AS Charter, sequence AS Sequence FROM run ORDER BY id").AsList());

    /// <inheritdoc/>
    public IReadOnlyList<RunLogEntry> RunLog(string identity) => Run(() => Connection.Query<RunLogEntry>(
        """
        SELECT l.position AS Position, l.kind AS Kind, l.body AS Body
        FROM run_log l JOIN run r ON r.id = l.run WHERE r.identity = @identity ORDER BY l.number
        """,
        new { identity }).AsList());

    /// <inheritdoc/>
    public IReadOnlyDictionary<string, long> RefusedByReason(string identity) => Run(() => Connection.Query<(string Reason, long Count)>(
        """
        SELECT j.reason, count(*) FROM rejected j JOIN run r ON r.id = j.run
        WHERE r.identity = @identity GROUP BY j.reason ORDER BY j.reason
        """,
        new { identity }).ToDictionary(r => r.Reason, r => r.Count));

    /// <inheritdoc/>
    public void Dispose()
    {
        Dispose(disposing: true);
        GC.SuppressFinalize(this);
    }

    /// <summary>Closes the connection.</summary>
    protected virtual void Dispose(bool disposing)
    {
        if (disposing)
        {
            Connection.Dispose();
        }
    }

    /// <summary>The head as stored.</summary>
    protected ChainHead StoredHead(SqliteTransaction? transaction = null) =>
        Connection.QuerySingleOrDefault<ChainHead>("SELECT sequence AS Sequence, sha256 AS Sha256 FROM chain_head", transaction: transaction)
        ?? throw SqliteFaults.Damage(File, "the head of the chain is missing");

    private T Run<T>(Func<T> work) => SqliteFaults.Run(File, work);

    // Set by name, not by constructor: where there is no row, SQLite cannot tell the type of length(document).
    private sealed record SnapshotRow
    {
        public long Sequence { get; init; }

        public string Kind { get; init; } = "";

        public string Charter { get; init; } = "";

        public string AsOf { get; init; } = "";

        public string CreatedAt { get; init; } = "";

        public string PreviousSha256 { get; init; } = "";

        public string Sha256 { get; init; } = "";

        public long Size { get; init; }

        public SnapshotEntry Entry => new(Sequence, Kind, Charter, AsOf, CreatedAt, PreviousSha256, Sha256, Size);
    }
}
