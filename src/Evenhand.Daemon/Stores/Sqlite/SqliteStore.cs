using System.Security.Cryptography;
using System.Text.Json;
using Dapper;
using Evenhand.Daemon.Hosting;
using Evenhand.Monitoring.Snapshots;
using Evenhand.Monitoring.Windows;
using Microsoft.Data.Sqlite;

namespace Evenhand.Daemon.Stores.Sqlite;

/// <summary>The embedded store: one SQLite file, one writer.</summary>
/// <remarks>Each public call writes one transaction, which SQLite forces to disk before it returns.</remarks>
internal sealed class SqliteStore : SqliteEvidence, IStore
{
    private readonly WriterLock _lock;
    private readonly Lock _gate = new();

    private SqliteStore(string file, SqliteConnection connection, WriterLock held)
        : base(file, connection) => _lock = held;

    /// <summary>Opens a store for writing.</summary>
    public static new SqliteStore Open(string file)
    {
        RefuseForeign(file);
        WriterLock held = WriterLock.Take(file);
        SqliteConnection? connection = null;
        try
        {
            return SqliteFaults.Run(file, () =>
            {
                connection = SqliteConnections.Writer(file);
                SqliteSchema.Upgrade(connection, file);
                return new SqliteStore(file, connection, held);
            });
        }
        catch
        {
            connection?.Dispose();
            held.Dispose();
            throw;
        }
    }

    /// <summary>Looks at a file that is there before anything of it is changed or put beside it.</summary>
    private static void RefuseForeign(string file)
    {
        if (System.IO.File.Exists(file) && new FileInfo(file).Length > 0)
        {
            SqliteFaults.Run(file, () =>
            {
                using SqliteConnection connection = SqliteConnections.Reader(file);
                SqliteSchema.RefuseNewer(connection, file);
                return true;
            });
        }
    }

    /// <inheritdoc/>
    public StoredRun OpenRun(string identity, string charter) => InTransaction(transaction =>
    {
        RunRow? row = Connection.QuerySingleOrDefault<RunRow>(
            "SELECT id, epoch, id_key AS IdKey, next_offsets AS NextOffsets, header, found_outcomes AS FoundOutcomes, sequence FROM run WHERE identity = @identity",
            new { identity },
            transaction);
        if (row is null)
        {
            return NewRun(identity, charter, transaction);
        }

        return row.Sequence is { } sequence ? Finished(row, identity, charter, sequence, transaction) : Resumed(row, identity, charter, transaction);
    });

    /// <inheritdoc/>
    public void Commit(StoredRun run, ShardCommit commit, IReadOnlyList<RunLogEntry>? log = null)
    {
        ArgumentNullException.ThrowIfNull(run);
        ArgumentNullException.ThrowIfNull(commit);
        if (run.IsBroken)
        {
            throw new StoreException($"store sqlite:{File}: a commit of this run failed before; run again to go on from what is stored");
        }

        run.IsBroken = true;
        string offsets = OffsetsOf(commit.Header);
        InTransaction(transaction =>
        {
            Fence(run, commit, offsets, transaction);
            WriteBuckets(run, commit, transaction);
            WriteIds(run, commit, transaction);
            WriteRefused(run, commit, transaction);
            foreach (RunLogEntry entry in log ?? [])
            {
                AddLog(run.Number, entry, transaction);
            }

            return true;
        });
        run.ExpectedOffsets = offsets;
        run.Position = commit.Header.Counts.Read;
        run.IsBroken = false;
    }

    /// <inheritdoc/>
    public SealedSnapshot Finish(StoredRun run, Func<long, string, SealedSnapshot> seal)
    {
        ArgumentNullException.ThrowIfNull(run);
        ArgumentNullException.ThrowIfNull(seal);
        return InTransaction(transaction =>
        {
            ChainHead head = HeadToBuildOn(transaction);
            SealedSnapshot snapshot = seal(head.Sequence + 1, head.Sha256);
            Append(snapshot, head.Sha256, transaction);
            int changed = Connection.Execute(
                "UPDATE run SET sequence = @sequence, id_key = NULL, header = NULL, found_outcomes = NULL WHERE id = @id AND epoch = @epoch AND next_offsets = @offsets AND sequence IS NULL",
                new { sequence = snapshot.Sequence, id = run.Number, epoch = run.Epoch, offsets = run.ExpectedOffsets },
                transaction);
            RefuseUnless(changed == 1);
            Connection.Execute("DELETE FROM bucket WHERE run = @id; DELETE FROM recent_ids WHERE run = @id", new { id = run.Number }, transaction);
            AddLog(run.Number, new RunLogEntry(run.Position, RunLogKind.Finished, Body(("sequence", snapshot.Sequence), ("sha256", snapshot.Sha256))), transaction);
            return snapshot;
        });
    }

    /// <inheritdoc/>
    protected override void Dispose(bool disposing)
    {
        base.Dispose(disposing);
        if (disposing)
        {
            _lock.Dispose();
        }
    }

    private static string OffsetsOf(ShardHeader header) => string.Join(',', header.NextOffsets);

    private static string Body(params (string Key, object Value)[] parts) =>
        JsonSerializer.Serialize(parts.ToDictionary(p => p.Key, p => p.Value));

    private StoredRun NewRun(string identity, string charter, SqliteTransaction transaction)
    {
        byte[] key = RandomNumberGenerator.GetBytes(16);
        long id = Connection.ExecuteScalar<long>(
            "INSERT INTO run (identity, charter, epoch, id_key, next_offsets) VALUES (@identity, @charter, 1, @key, '') RETURNING id",
            new { identity, charter, key },
            transaction);
        AddLog(id, new RunLogEntry(0, RunLogKind.Started, Body(("identity", identity), ("version", ProgramVersion.Text))), transaction);
        return new StoredRun { Number = id, Identity = identity, Charter = charter, Epoch = 1, IdKey = key, ExpectedOffsets = "" };
    }

    private StoredRun Finished(RunRow row, string identity, string charter, long sequence, SqliteTransaction transaction)
    {
        (string sha256, byte[] document) = Connection.QuerySingle<(string, byte[])>(
            "SELECT sha256, document FROM snapshot WHERE sequence = @sequence", new { sequence }, transaction);
        return new StoredRun
        {
            Number = row.Id,
            Identity = identity,
            Charter = charter,
            Epoch = row.Epoch,
            IdKey = [],
            Snapshot = new SealedSnapshot(sequence, sha256, document),
            ExpectedOffsets = row.NextOffsets,
        };
    }

    private StoredRun Resumed(RunRow row, string identity, string charter, SqliteTransaction transaction)
    {
        RefuseDamage(transaction);
        Connection.Execute("UPDATE run SET epoch = epoch + 1 WHERE id = @Id", new { row.Id }, transaction);
        ShardHeader? header = row.Header is null ? null : ShardHeader.FromBytes(row.Header);
        AddLog(row.Id, new RunLogEntry(header?.Counts.Read ?? 0, RunLogKind.Resumed, Body(("version", ProgramVersion.Text))), transaction);
        return new StoredRun
        {
            Number = row.Id,
            Identity = identity,
            Charter = charter,
            Epoch = row.Epoch + 1,
            IdKey = row.IdKey!,
            Header = header,
            Buckets = [.. Connection.Query<(long Tier, long Start, long Slice, byte[] Packed)>(
                "SELECT tier, start, slice, packed FROM bucket WHERE run = @Id ORDER BY tier, start, slice", new { row.Id }, transaction)
                .Select(b => new StoredBucket(new BucketKey((Tier)b.Tier, b.Start, (int)b.Slice), b.Packed))],
            Ids = [.. Connection.Query<(long, byte[])>("SELECT first, ids FROM recent_ids WHERE run = @Id ORDER BY first", new { row.Id }, transaction)],
            FoundOutcomes = row.FoundOutcomes,
            ExpectedOffsets = row.NextOffsets,
            Position = header?.Counts.Read ?? 0,
        };
    }

    /// <summary>Damage to an index hides rows without an error, so whoever builds on what is stored has the tables of runs checked.</summary>
    private void RefuseDamage(SqliteTransaction transaction)
    {
        foreach (string table in (string[])["run", "bucket", "recent_ids", "rejected", "run_log"])
        {
            string found = Connection.QueryFirst<string>($"PRAGMA integrity_check({table})", transaction: transaction);
            if (found != "ok")
            {
                throw SqliteFaults.Damage(File, found);
            }
        }
    }

    /// <summary>The fence: only the run's last opener, and only where it left off. The header goes with it.</summary>
    private void Fence(StoredRun run, ShardCommit commit, string offsets, SqliteTransaction transaction)
    {
        int changed = Connection.Execute(
            """
            UPDATE run SET next_offsets = @offsets, header = @header, found_outcomes = @found
            WHERE id = @id AND epoch = @epoch AND next_offsets = @expected AND sequence IS NULL
            """,
            new { offsets, header = commit.Header.ToBytes(), found = commit.FoundOutcomes, id = run.Number, epoch = run.Epoch, expected = run.ExpectedOffsets },
            transaction);
        RefuseUnless(changed == 1);
    }

    private void RefuseUnless(bool isMine)
    {
        if (!isMine)
        {
            throw new StoreException($"store sqlite:{File}: another process has taken this run over; nothing was stored. Let that one finish");
        }
    }

    private void WriteBuckets(StoredRun run, ShardCommit commit, SqliteTransaction transaction)
    {
        Connection.Execute(
            """
            INSERT INTO bucket (run, tier, start, slice, packed) VALUES (@run, @tier, @start, @slice, @packed)
            ON CONFLICT (run, tier, start, slice) DO UPDATE SET packed = excluded.packed
            """,
            commit.Dirty.Select(b => new { run = run.Number, tier = (int)b.Key.Tier, start = b.Key.Start, slice = b.Key.Slice, packed = b.Packed }),
            transaction);
        Connection.Execute(
            "DELETE FROM bucket WHERE run = @run AND tier = @tier AND start = @start AND slice = @slice",
            commit.Dropped.Select(k => new { run = run.Number, tier = (int)k.Tier, start = k.Start, slice = k.Slice }),
            transaction);
    }

    private void WriteIds(StoredRun run, ShardCommit commit, SqliteTransaction transaction)
    {
        int count = commit.NewIds.Length / ShardCommit.IdBytes;
        if (count > 0)
        {
            Connection.Execute(
                "INSERT INTO recent_ids (run, first, count, ids) VALUES (@run, @first, @count, @ids)",
                new { run = run.Number, first = commit.FirstId, count, ids = commit.NewIds },
                transaction);
        }

        Connection.Execute(
            "DELETE FROM recent_ids WHERE run = @run AND first + count <= @forgotten",
            new { run = run.Number, forgotten = commit.ForgottenIds },
            transaction);
    }

    private void WriteRefused(StoredRun run, ShardCommit commit, SqliteTransaction transaction) => Connection.Execute(
        "INSERT INTO rejected (run, input, position, reason, bytes) VALUES (@run, @input, @position, @reason, @bytes)",
        commit.Refused.Select(r => new { run = run.Number, input = r.Input, position = r.Position, reason = r.Reason, bytes = r.Bytes }),
        transaction);

    private ChainHead HeadToBuildOn(SqliteTransaction transaction)
    {
        ChainHead head = StoredHead(transaction);
        ChainHead last = Connection.QuerySingleOrDefault<ChainHead>("SELECT sequence AS Sequence, sha256 AS Sha256 FROM snapshot ORDER BY sequence DESC LIMIT 1", transaction: transaction)
            ?? new ChainHead(0, SnapshotSeal.Genesis);
        return head == last ? head : throw SqliteFaults.Damage(File, "the head of the chain is not its last snapshot");
    }

    private void Append(SealedSnapshot snapshot, string previous, SqliteTransaction transaction)
    {
        using JsonDocument document = JsonDocument.Parse(snapshot.Bytes, new JsonDocumentOptions { MaxDepth = 128 });
        JsonElement root = document.RootElement;
        Connection.Execute(
            """
            INSERT INTO snapshot (sequence, kind, charter, as_of, created_at, previous_sha256, sha256, document)
            VALUES (@sequence, @kind, @charter, @asOf, @createdAt, @previous, @sha256, @bytes);
            UPDATE chain_head SET sequence = @sequence, sha256 = @sha256
            """,
            new
            {
                sequence = snapshot.Sequence,
                kind = root.GetProperty("kind").GetString(),
                charter = root.GetProperty("charter").GetProperty("id").GetString(),
                asOf = root.GetProperty("as_of").GetString(),
                createdAt = root.GetProperty("created_at").GetString(),
                previous,
                sha256 = snapshot.Sha256,
                bytes = snapshot.Bytes,
            },
            transaction);
    }

    private void AddLog(long run, RunLogEntry entry, SqliteTransaction transaction) => Connection.Execute(
        """
        INSERT INTO run_log (run, number, position, kind, body)
        VALUES (@run, (SELECT coalesce(max(number), 0) + 1 FROM run_log WHERE run = @run), @Position, @Kind, @Body)
        """,
        new { run, entry.Position, entry.Kind, entry.Body },
        transaction);

    private T InTransaction<T>(Func<SqliteTransaction, T> work) => SqliteFaults.Run(File, () =>
    {
        lock (_gate)
        {
            // Immediate: the write lock is taken at once, so that what is read is what is written upon.
            using SqliteTransaction transaction = Connection.BeginTransaction(deferred: false);
            T result = work(transaction);
            transaction.Commit();
            return result;
        }
    });

    private sealed record RunRow
    {
        public long Id { get; init; }

        public long Epoch { get; init; }

        public byte[]? IdKey { get; init; }

        public string NextOffsets { get; init; } = "";

        public byte[]? Header { get; init; }

        public byte[]? FoundOutcomes { get; init; }

        public long? Sequence { get; init; }
    }
}
