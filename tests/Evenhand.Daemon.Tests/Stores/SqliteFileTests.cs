using Dapper;
using Evenhand.Daemon.Stores;
using Evenhand.Daemon.Stores.Sqlite;
using Evenhand.Daemon.Tests.Processes;
using Microsoft.Data.Sqlite;
using static Evenhand.Daemon.Tests.Stores.SampleCommits;

namespace Evenhand.Daemon.Tests.Stores;

/// <summary>Files and folders that are no SQLite store of this version, or cannot be one: exit status 3 and one clear line.</summary>
public sealed class SqliteFileTests : IDisposable
{
    private readonly SqlitePlace _place = new();
    private readonly StoredReplay _replay = new();

    public void Dispose()
    {
        _place.Dispose();
        _replay.Dispose();
    }

    [Theory]
    [InlineData("no database at all")]
    [InlineData("SQLite format 3\0")]
    public void Open_AFileThatIsNoDatabase_IsRefusedAndLeftAlone(string text)
    {
        string bytes = string.Concat(Enumerable.Repeat(text, 100));
        File.WriteAllText(_place.DatabaseFile, bytes);

        Fails("not a SQLite database", _place.DatabaseFile);
        FailsToShow("not a SQLite database", _place.DatabaseFile);
        Assert.Equal(bytes, File.ReadAllText(_place.DatabaseFile));
    }

    [Fact]
    public void Open_ADatabaseOfAnotherProgram_IsRefusedAndLeftAlone()
    {
        _place.Execute("CREATE TABLE orders (id INTEGER PRIMARY KEY)");
        Fails("a database of another program", _place.DatabaseFile);
        FailsToShow("a database of another program", _place.DatabaseFile);
        Assert.Equal(1, _place.Scalar<long>("SELECT count(*) FROM sqlite_master"));
    }

    [Fact]
    public void Open_WrittenByALaterVersion_IsRefused()
    {
        _place.Open().Dispose();
        _place.Execute("INSERT INTO schema_version (ScriptName, Applied) VALUES ('sqlite/9999-later', '2040-01-01')");
        Fails("later version (9999-later)", _place.DatabaseFile);
        FailsToShow("later version (9999-later)", _place.DatabaseFile);
    }

    [Fact]
    public void Open_InAFolderThatIsNotThere_NamesTheFolder()
    {
        string file = Path.Combine(Path.GetDirectoryName(_place.DatabaseFile)!, "none", "x.db");
        Fails("does not exist", file);
        FailsToShow("no such store", file);
        Assert.False(Directory.Exists(Path.GetDirectoryName(file)));
    }

    [Fact]
    public void Open_AFolderInPlaceOfTheFile_IsRefused()
    {
        Directory.CreateDirectory(_place.DatabaseFile);
        Fails("cannot be opened", _place.DatabaseFile);
    }

    [Fact]
    public void Open_InAFolderThatTakesNoFiles_SaysSo()
    {
        if (OperatingSystem.IsWindows())
        {
            return;
        }

        string folder = Path.GetDirectoryName(_place.DatabaseFile)!;
        if (!Environment.IsPrivilegedProcess)
        {
            File.SetUnixFileMode(folder, UnixFileMode.UserRead | UnixFileMode.UserExecute);
        }
        else
        {
            // Root writes whatever the mode says, but the kernel's own folder takes files from nobody.
            folder = "/sys";
        }

        try
        {
            Fails(Path.Combine(folder, "evidence.db-lock"), Path.Combine(folder, "evidence.db"));
        }
        finally
        {
            if (!Environment.IsPrivilegedProcess)
            {
                File.SetUnixFileMode(folder, UnixFileMode.UserRead | UnixFileMode.UserWrite | UnixFileMode.UserExecute);
            }
        }
    }

    [Fact]
    public void Open_AStoreWithAGuardTakenAway_NamesIt()
    {
        using (IStore store = _place.Open())
        {
            Finished(store, Identity('a'));
        }

        _place.Execute("DROP TRIGGER snapshot_no_update");
        using IEvidenceStore reader = _place.OpenReadOnly();
        Assert.Equal(["snapshot_no_update"], reader.MissingGuards());
    }

    /// <summary>The files as they stand while a transaction is open are what a power cut leaves.</summary>
    [Fact]
    public void Open_AfterATransactionCutOff_HoldsWhatWasCommittedBefore()
    {
        string folder = Path.GetDirectoryName(_place.DatabaseFile)!, copy = Path.Combine(folder, "copy.db");
        using (IStore store = _place.Open())
        {
            StoredRun run = store.OpenRun(Identity('a'), Charter);
            store.Commit(run, At(1) with { Dirty = [Day(1, 1)] });
        }

        using (SqliteConnection connection = SqliteConnections.Writer(_place.DatabaseFile))
        {
            // Without room in memory the half-done transaction goes to the log on disk.
            connection.Execute("PRAGMA cache_size = 1; PRAGMA cache_spill = 1");
            using SqliteTransaction transaction = connection.BeginTransaction();
            connection.Execute("UPDATE run SET next_offsets = '2'", transaction: transaction);
            for (int i = 0; i < 200; i++)
            {
                connection.Execute("INSERT INTO bucket (run, tier, start, slice, packed) VALUES (1, 2, @i, 1, zeroblob(5000))", new { i }, transaction);
            }

            Assert.True(new FileInfo(_place.DatabaseFile + "-wal").Length > 500_000);
            File.Copy(_place.DatabaseFile, copy);
            File.Copy(_place.DatabaseFile + "-wal", copy + "-wal");
        }

        using SqliteStore after = SqliteStore.Open(copy);
        StoredRun stored = after.OpenRun(Identity('a'), Charter);
        Assert.Equal([1], Assert.Single(stored.Buckets).Packed);
        after.Commit(stored, At(2));
    }

    private void Fails(string saying, string file) => AssertFailure(saying, ProgramRun.Replay(_replay.Arguments($"sqlite:{file}")));

    private static void FailsToShow(string saying, string file) => AssertFailure(saying, ProgramRun.Of("evidence", "verify", "--store", $"sqlite:{file}"));

    private static void AssertFailure(string saying, ProgramRun run)
    {
        Assert.Equal((3, ""), (run.ExitCode, run.Out));
        string line = Assert.Single(run.ErrorLines);
        Assert.StartsWith("evenhand: store sqlite:", line, StringComparison.Ordinal);
        Assert.Contains(saying, line, StringComparison.Ordinal);
    }
}
