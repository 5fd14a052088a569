using System.Security.Cryptography;
using Evenhand.Daemon.Tests.Processes;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>What a replay reads and writes is never taken for something else.</summary>
public sealed class PlaceTests : IDisposable
{
    private readonly WorkFolder _folder = new();
    private readonly string _charter;
    private readonly string _input;

    public PlaceTests()
    {
        _charter = _folder.Write("grants.yaml", HarbourTown.Charter);
        _input = _folder.Write("decisions.ndjson", HarbourTown.Stream(200, river: 8, hill: 5));
    }

    public void Dispose() => _folder.Dispose();

    [Theory]
    [InlineData("grants.yaml")]
    [InlineData("decisions.ndjson")]
    [InlineData("runs.db")]
    [InlineData("runs.db-wal")]
    [InlineData("link.ndjson")]
    public void Replay_OutOntoWhatItReadsOrKeeps_IsRefusedBeforeAnyWork(string name)
    {
        File.CreateSymbolicLink(_folder.At("link.ndjson"), _input);
        byte[] before = File.ReadAllBytes(_input);
        ProgramRun run = ProgramRun.Replay(_charter, _input, "--store", "sqlite:" + _folder.At("runs.db"), "--out", _folder.At(name));

        Assert.Equal(2, run.ExitCode);
        Assert.Contains("would overwrite", Assert.Single(run.ErrorLines), StringComparison.Ordinal);
        Assert.Equal(before, File.ReadAllBytes(_input));
        Assert.False(File.Exists(_folder.At("runs.db")));
    }

    [Fact]
    public void Export_OntoItsOwnFile_IsRefused()
    {
        ProgramRun.Replay(_charter, _input, "--out", _folder.At("chain.ndjson"));
        byte[] before = File.ReadAllBytes(_folder.At("chain.ndjson"));

        Assert.Equal(2, ProgramRun.Of("evidence", "export", _folder.At("chain.ndjson"), "--out", _folder.At("chain.ndjson"), "--without-state").ExitCode);
        Assert.Equal(before, File.ReadAllBytes(_folder.At("chain.ndjson")));
    }

    [Fact]
    public void Replay_OutWhereNothingCanBeWritten_IsOneLineBeforeAnyWork()
    {
        ProgramRun run = ProgramRun.Replay(_charter, _input, "--store", "sqlite:" + _folder.At("runs.db"), "--out", _folder.At("nowhere/s.json"));

        Assert.Equal(3, run.ExitCode);
        Assert.Single(run.ErrorLines);
        Assert.False(File.Exists(_folder.At("runs.db")));
    }

    [Fact]
    public void Replay_ADatabaseOfAnotherProgram_IsRefusedAndLeftAsItIs()
    {
        using (Microsoft.Data.Sqlite.SqliteConnection other = new($"Data Source={_folder.At("other.db")};Pooling=False"))
        {
            other.Open();
            using Microsoft.Data.Sqlite.SqliteCommand command = other.CreateCommand();
            command.CommandText = "CREATE TABLE guest (name TEXT)";
            command.ExecuteNonQuery();
        }

        byte[] before = SHA256.HashData(File.ReadAllBytes(_folder.At("other.db")));
        Assert.Equal(3, ProgramRun.Replay(_charter, _input, "--store", "sqlite:" + _folder.At("other.db")).ExitCode);
        Assert.Equal(before, SHA256.HashData(File.ReadAllBytes(_folder.At("other.db"))));
        Assert.False(File.Exists(_folder.At("other.db-lock")));
    }

    [Fact]
    public void Replay_ATableOnStdin_IsReadAsATable()
    {
        string charter = _folder.Write("table.yaml", HarbourTown.Charter.Replace("at: /", "at: ", StringComparison.Ordinal).Replace(": /", ": ", StringComparison.Ordinal));
        string table = "case,decided_at,language,decision,upheld\nc1,2031-03-01T06:00:00Z,river,fast_track,\nc2,2031-03-01T06:01:00Z,hill,oops,\n";
        ProgramRun run = ProgramRun.ReplayStdin(table, charter, "-", "--json");

        Assert.Equal((2L, 1L), ((long)run.Document["records"]!["read"]!, (long)run.Document["records"]!["used"]!));
        Assert.Contains("the first at stdin row 2", run.Error, StringComparison.Ordinal);
    }

    [Fact]
    public void Replay_APublicKeyToSignWith_IsOneLine()
    {
        using ECDsa key = ECDsa.Create(ECCurve.NamedCurves.nistP256);
        ProgramRun run = ProgramRun.Replay(_charter, _input, "--signing-key", _folder.Write("key.pub", key.ExportSubjectPublicKeyInfoPem()));

        Assert.Equal(2, run.ExitCode);
        Assert.Contains("not a readable ECDSA private key", Assert.Single(run.ErrorLines), StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("9999-12-31T23:59:59Z")]
    [InlineData("0001-01-01T00:00:00Z")]
    public void Replay_AFillerForNoDate_IsRejectedAndTheRunGoesOn(string filler)
    {
        string input = _folder.Write("far.ndjson", HarbourTown.Stream(50, river: 8, hill: 5) + $$"""{"case":"x","decided_at":"{{filler}}","language":"hill","decision":"fast_track"}""");
        ProgramRun run = ProgramRun.Replay(_charter, input, "--json");

        Assert.Equal((50L, 1L), ((long)run.Document["records"]!["used"]!, (long)run.Document["records"]!["rejected_by_reason"]!["bad_time"]!));
        Assert.Equal(2, ProgramRun.Replay(_charter, input, "--as-of", filler).ExitCode);
    }

    [Theory]
    [InlineData("--batch-size", "0")]
    [InlineData("--commit-every", "-1")]
    public void Replay_ANumberOutOfRange_IsBadUsage(string option, string value) =>
        Assert.Equal(2, ProgramRun.Replay(_charter, _input, option, value).ExitCode);

    [Fact]
    public void Replay_ControlCharactersInAValue_DoNotReachTheTerminal()
    {
        string charter = _folder.Write("odd.yaml", HarbourTown.Charter.Replace("coast]", "\"co\\u001b[31mast\\u202e\"]", StringComparison.Ordinal));
        ProgramRun run = ProgramRun.Replay(charter, _input);

        Assert.Equal(0, run.ExitCode);
        Assert.DoesNotContain(run.Out, c => c is '\u001b' or '\u202e');
        Assert.Contains("\\u{001B}[31mast\\u{202E}", run.Out, StringComparison.Ordinal);
    }
}
