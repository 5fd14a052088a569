using Evenhand.Daemon.Tests.Processes;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>Bad usage and bad input of <c>evenhand replay</c>: exit status 2 and lines that a person can act on.</summary>
public sealed class ReplayFailureTests : IDisposable
{
    private readonly WorkFolder _folder = new();
    private readonly string _charter;
    private readonly string _input;

    public ReplayFailureTests()
    {
        _charter = _folder.Write("grants.yaml", HarbourTown.Charter);
        _input = _folder.Write("grants.ndjson", HarbourTown.Stream(10, river: 8, hill: 5));
    }

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void Replay_WrongCharter_PrintsEveryProblemWithItsPlace()
    {
        string wrong = _folder.Write("wrong.yaml", """
            charter: flood-grants
            id: /case
            time: /decided_at
            decision: { at: /decision, favorable: [fast_track], unfavourable: [manual_review] }
            groups:
              - { name: language, at: /language, values: [river, hill], reference: coast }
            windows: [1h, tomorrow]
            """);
        ProgramRun run = ProgramRun.Replay(wrong, _input);
        Assert.Equal((2, ""), (run.ExitCode, run.Out));
        Assert.Equal(4, run.ErrorLines.Length);
        Assert.All(run.ErrorLines, line => Assert.Matches("^" + System.Text.RegularExpressions.Regex.Escape(wrong) + @":\d+:\d+: \S+: .+; .+$", line));
        Assert.Contains(run.ErrorLines, l => l.Contains(":4:", StringComparison.Ordinal) && l.Contains("favourable", StringComparison.Ordinal));
        Assert.Contains(run.ErrorLines, l => l.Contains(":6:", StringComparison.Ordinal) && l.Contains("coast", StringComparison.Ordinal));
        Assert.Contains(run.ErrorLines, l => l.Contains(":7:", StringComparison.Ordinal) && l.Contains("tomorrow", StringComparison.Ordinal));
    }

    [Fact]
    public void Replay_MissingInput_SaysSoInOneLine() => Fails("no such file", _charter, _folder.At("nothing.ndjson"));

    [Fact]
    public void Replay_MissingCharter_SaysSoInOneLine() => Fails("no such file", _folder.At("nothing.yaml"), _input);

    [Fact]
    public void Replay_MissingOutcomes_SaysSoInOneLine() => Fails("no such file", _charter, _input, "--outcomes", _folder.At("nothing.ndjson"));

    [Fact]
    public void Replay_FolderAsInput_SaysSoInOneLine() => Fails("is a folder", _charter, Path.GetDirectoryName(_charter)!);

    [Fact]
    public void Replay_EmptyCsv_SaysSoInOneLine() => Fails("is empty", _charter, _folder.Write("empty.csv", ""));

    [Fact]
    public void Replay_CsvWithoutTheDecision_NamesTheColumn() =>
        Fails("decision", _charter, _folder.Write("grants.csv", "case,decided_at,language\nc1,2031-03-01T06:00:00Z,river\n"));

    [Theory]
    [InlineData(1)]
    [InlineData(8)]
    [InlineData(20)]
    [InlineData(100)]
    public void Replay_TruncatedGzip_SaysSoInOneLine(int missing)
    {
        using MemoryStream packed = new();
        using (System.IO.Compression.GZipStream gzip = new(packed, System.IO.Compression.CompressionLevel.Optimal, leaveOpen: true))
        {
            gzip.Write(File.ReadAllBytes(_input));
        }

        string cut = _folder.At("grants.ndjson.gz");
        File.WriteAllBytes(cut, packed.ToArray()[..^missing]);
        Fails("grants.ndjson.gz", _charter, cut);
    }

    [Fact]
    public void Replay_CharterWithoutTime_NeedsTheAsOf()
    {
        string timeless = _folder.Write("timeless.yaml", """
            charter: flood-grants
            decision: { at: /decision, favourable: [fast_track], unfavourable: [manual_review] }
            groups: [{ name: language, at: /language, values: [river, hill], reference: river }]
            """);
        Fails("--as-of", timeless, _input);
        Assert.Equal(0, ProgramRun.Replay(timeless, _input, "--as-of", "2031-04-01T00:00:00Z").ExitCode);
    }

    [Fact]
    public void Replay_AsOfThatIsNoTime_SaysHowToWriteIt() => Fails("RFC 3339", _charter, _input, "--as-of", "yesterday");

    [Fact]
    public void Replay_UnknownOption_PointsToTheHelp() => Fails("--help", _charter, _input, "--as-if", "2031-04-01T00:00:00Z");

    [Fact]
    public void Replay_StdinTwice_IsRefused() => Fails("only once", _charter, "-", "-");

    private static void Fails(string saying, params string[] args)
    {
        ProgramRun run = ProgramRun.Replay(args);
        Assert.Equal((2, ""), (run.ExitCode, run.Out));
        Assert.Contains(saying, Assert.Single(run.ErrorLines), StringComparison.Ordinal);
    }
}
