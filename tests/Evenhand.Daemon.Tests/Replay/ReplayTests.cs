using System.Globalization;
using System.IO.Compression;
using System.Text;
using System.Text.Json.Nodes;
using Evenhand.Daemon.Tests.Processes;
using Evenhand.Testing;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>What <c>evenhand replay</c> promises of its results, over small made-up streams, run as a process.</summary>
public sealed class ReplayTests : IDisposable
{
    private static readonly string[] Parts = ["used", "other", "rejected", "late", "ahead", "duplicate", "held", "excluded"];

    private readonly WorkFolder _folder = new();
    private readonly string _charter;

    public ReplayTests() => _charter = _folder.Write("grants.yaml", HarbourTown.Charter);

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void Replay_SameInputTwice_GivesTheSameBytes()
    {
        string input = Grants(HarbourTown.Stream(300, river: 8, hill: 5));
        byte[] first = Snapshot("first.json", input);
        ProgramRun printed = ProgramRun.Replay(_charter, input, "--json", "--out", _folder.At("second.json"));
        Assert.Equal(first, File.ReadAllBytes(_folder.At("second.json")));
        Assert.Equal(File.ReadAllText(_folder.At("second.json")) + "\n", printed.Out);
    }

    [Theory]
    [InlineData(1)]
    [InlineData(7)]
    [InlineData(4096)]
    public void Replay_AnyBatchSize_GivesTheSameBytes(int size)
    {
        string input = Grants(Mixed());
        Assert.Equal(Snapshot("usual.json", input), Snapshot("sized.json", input, "--batch-size", size.ToString(CultureInfo.InvariantCulture)));
    }

    [Fact]
    public void Replay_AsOf_LeavesLaterRecordsOut()
    {
        string input = Grants(HarbourTown.Stream(100, river: 8, hill: 5));
        JsonObject whole = ProgramRun.Replay(_charter, input, "--json").Document;
        JsonObject cut = ProgramRun.Replay(_charter, input, "--json", "--as-of", HarbourTown.At(60)).Document;
        Assert.Equal((100, 0), (Count(whole, "used"), Count(whole, "excluded")));
        Assert.Equal((60, 40), (Count(cut, "used"), Count(cut, "excluded")));
        Assert.Equal(HarbourTown.At(60), (string?)cut["as_of"]);
        Assert.Equal(HarbourTown.At(60), (string?)cut["created_at"]);
    }

    [Fact]
    public void Replay_TheSameRecordsInTwoFiles_CountsTheSecondAsDuplicates()
    {
        string lines = HarbourTown.Stream(50, river: 8, hill: 5);
        JsonObject once = ProgramRun.Replay(_charter, Grants(lines), "--json").Document;
        JsonObject twice = ProgramRun.Replay(_charter, Grants(lines), _folder.Write("again.ndjson", lines), "--json").Document;
        Assert.Equal((100, 50, 50), (Count(twice, "read"), Count(twice, "used"), Count(twice, "duplicate")));
        Assert.Equal(once["readings"]!.ToJsonString(), twice["readings"]!.ToJsonString());
    }

    [Fact]
    public void Records_OfEveryKind_AreCountedApartAndAddUp()
    {
        JsonObject document = ProgramRun.Replay(_charter, Grants(Mixed()), "--json", "--as-of", HarbourTown.At(300)).Document;
        Assert.Equal([200, 1, 6, 1, 1, 1, 0, 1], Parts.Select(p => Count(document, p)));
        Assert.Equal(Count(document, "read"), Parts.Sum(p => Count(document, p)));
        string reasons = document["records"]!["rejected_by_reason"]!.ToJsonString();
        Assert.Equal("""{"bad_time":1,"blank_line":1,"malformed_json":1,"missing_decision":1,"missing_id":1,"unknown_decision":1}""", reasons);
    }

    [Fact]
    public void Replay_Stdin_EqualsTheFileExceptForTheSourcesName()
    {
        string lines = HarbourTown.Stream(120, river: 8, hill: 5);
        JsonObject file = ProgramRun.Replay(_charter, Grants(lines), "--json").Document;
        JsonObject pipe = ProgramRun.ReplayStdin(lines, _charter, "-", "--json").Document;
        Assert.Equal("file:grants.ndjson", (string?)file["sources"]![0]!["source"]);
        Assert.Equal("file:stdin", (string?)pipe["sources"]![0]!["source"]);
        foreach (JsonObject document in new[] { file, pipe })
        {
            document["sources"]![0]!["source"] = "";
            document.Remove("sha256");
        }

        Assert.Equal(file.ToJsonString(), pipe.ToJsonString());
    }

    [Fact]
    public void Replay_ByteOrderMarkAndLineEndsOfWindows_ChangeNoReading()
    {
        string lines = HarbourTown.Stream(120, river: 8, hill: 5);
        JsonObject plain = ProgramRun.Replay(_charter, Grants(lines), "--json").Document;
        string other = _folder.Write("other.ndjson", "\uFEFF" + lines.Replace("\n", "\r\n", StringComparison.Ordinal));
        Assert.Equal(plain["readings"]!.ToJsonString(), ProgramRun.Replay(_charter, other, "--json").Document["readings"]!.ToJsonString());
    }

    [Fact]
    public void Replay_RejectedRecords_LeaveTheExitStatusAlone()
    {
        ProgramRun run = ProgramRun.Replay(_charter, Grants("{\nnot json\n" + HarbourTown.Stream(10, river: 8, hill: 5)));
        Assert.Equal(0, run.ExitCode);
        Assert.Contains("2 refused as malformed_json, the first at ", Assert.Single(run.ErrorLines), StringComparison.Ordinal);
        Assert.EndsWith("grants.ndjson:1", run.ErrorLines[0], StringComparison.Ordinal);
    }

    [Fact]
    public void Replay_EveryLineRejected_StillWritesASnapshot()
    {
        ProgramRun run = ProgramRun.Replay(_charter, Grants("[]\n[]\n7\n"), "--json");
        Assert.Equal(0, run.ExitCode);
        Assert.Equal((3, 0, 3), (Count(run.Document, "read"), Count(run.Document, "used"), Count(run.Document, "rejected")));
        Assert.Equal("no-used-records", (string?)run.Document["alerts"]![0]!["alert"]);
    }

    [Fact]
    public void Replay_EmptyNdjson_IsARunOverNothing()
    {
        ProgramRun run = ProgramRun.Replay(_charter, Grants(""), "--json");
        Assert.Equal((0, 0L), (run.ExitCode, Count(run.Document, "read")));
        Assert.Contains("--as-of", Assert.Single(run.ErrorLines), StringComparison.Ordinal);
    }

    [Fact]
    public void Replay_FailOnAlert_ExitsOneOnlyWhereAnAlertIsOpen()
    {
        string apart = _folder.Write("apart.ndjson", HarbourTown.Stream(400, river: 8, hill: 4));
        string even = _folder.Write("even.ndjson", HarbourTown.Stream(400, river: 8, hill: 8));
        ProgramRun open = ProgramRun.Replay(_charter, apart, "--json", "--fail-on-alert");
        ProgramRun closed = ProgramRun.Replay(_charter, even, "--json", "--fail-on-alert");
        Assert.Equal((1, 0), (open.ExitCode, closed.ExitCode));
        Assert.Equal("language-ratio", (string?)Assert.Single(open.Document["alerts"]!.AsArray())!["alert"]);
        Assert.Empty(closed.Document["alerts"]!.AsArray());
        Assert.Equal(0, ProgramRun.Replay(_charter, apart).ExitCode);
    }

    [Fact]
    public void Outcomes_JoinedById_CountOnlyWithinTheTimeAllowed()
    {
        string decisions = Grants(HarbourTown.Stream(40, river: 8, hill: 5));
        double day = 24 * 60;
        string outcomes = _folder.Write("outcomes.ndjson", string.Concat(
            Enumerable.Range(0, 20).Select(i => Outcome(HarbourTown.CaseOf(i), 10 * day, i % 4 < 2 ? "true" : "false"))
                .Append(Outcome(HarbourTown.CaseOf(20), 40 * day, "true"))      // later than 30 days
                .Append(Outcome(HarbourTown.CaseOf(21), -10, "true"))           // before its decision
                .Append(Outcome(HarbourTown.CaseOf(0), 11 * day, "false"))      // a second one of its case
                .Append(Outcome("elsewhere", 10 * day, "true"))
                .Append(Outcome(HarbourTown.CaseOf(22), 10 * day, "perhaps"))));
        ProgramRun run = ProgramRun.Replay(_charter, decisions, "--outcomes", outcomes, "--json", "--as-of", HarbourTown.At(60 * day));
        Assert.Equal(
            """{"duplicate":1,"excluded":0,"matched":20,"outside":2,"read":25,"rejected":1,"unmatched":1}""",
            run.Document["outcomes"]!.ToJsonString());
        JsonNode rate = Reading(run.Document, "outcome_rate", null);
        Assert.Equal((20L, 0.5), ((long)rate["count"]!, (double)rate["value"]!));
    }

    [Fact]
    public void Outcomes_AfterTheAsOf_AreNotKnownYet()
    {
        string decisions = Grants(HarbourTown.Stream(40, river: 8, hill: 5));
        const double Day = 24 * 60;
        string outcomes = _folder.Write("outcomes.ndjson", string.Concat(
            Enumerable.Range(0, 20).Select(i => Outcome(HarbourTown.CaseOf(i), (i < 15 ? 3 : 10) * Day, "true"))));
        JsonObject document = ProgramRun.Replay(_charter, decisions, "--outcomes", outcomes, "--json", "--as-of", HarbourTown.At(5 * Day)).Document;
        Assert.Equal(
            """{"duplicate":0,"excluded":5,"matched":15,"outside":0,"read":20,"rejected":0,"unmatched":0}""",
            document["outcomes"]!.ToJsonString());
        Assert.Equal(15, (long)Reading(document, "outcome_rate", null)["count"]!);
    }

    [Fact]
    public void Outcomes_OfACaseDecidedTwice_ServeBothDecisionsAndCountOnce()
    {
        const double Day = 24 * 60;
        string patient = _folder.Write("patient.yaml", HarbourTown.Charter.Replace("ahead: 30m", "ahead: 30d", StringComparison.Ordinal));
        string decisions = Grants(
            string.Concat(Enumerable.Range(0, 12).Select(i => HarbourTown.Record($"c{i}", i, "river", "fast_track")))
            + HarbourTown.Record("c0", 2 * Day, "river", "manual_review"));
        string outcomes = _folder.Write("outcomes.ndjson", string.Concat(Enumerable.Range(0, 12).Select(i => Outcome($"c{i}", 5 * Day, "true"))));
        JsonObject document = ProgramRun.Replay(patient, decisions, "--outcomes", outcomes, "--json", "--as-of", HarbourTown.At(9 * Day)).Document;
        Assert.Equal(
            """{"duplicate":0,"excluded":0,"matched":12,"outside":0,"read":12,"rejected":0,"unmatched":0}""",
            document["outcomes"]!.ToJsonString());
        Assert.Equal(13, (long)Reading(document, "outcome_rate", null)["count"]!);
    }

    [Fact]
    public void Replay_GzipInTwoMembers_EqualsThePlainFileInEveryReading()
    {
        string first = HarbourTown.Stream(60, river: 8, hill: 5);
        string second = HarbourTown.Record("z1", 61, "hill", "fast_track");
        JsonObject plain = ProgramRun.Replay(_charter, Grants(first + second), "--json").Document;
        File.WriteAllBytes(_folder.At("grants.ndjson.gz"), [.. Packed(first), .. Packed(second)]);
        JsonObject packed = ProgramRun.Replay(_charter, _folder.At("grants.ndjson.gz"), "--json").Document;
        Assert.Equal(61, Count(packed, "used"));
        Assert.Equal(plain["readings"]!.ToJsonString(), packed["readings"]!.ToJsonString());
    }

    [Fact]
    public void Table_OfAnOpenDataset_ShowsCountsRatesAndTheCaution()
    {
        ProgramRun run = ProgramRun.Replay(
            TestData.Path("charters/open/mortgage.yaml"),
            TestData.Path("hmda_boston_1990.csv"),
            "--as-of",
            "2031-01-01T00:00:00Z");
        Assert.Equal((0, ""), (run.ExitCode, run.Error));
        foreach (string text in new[] { "2,380 records read", "339", "243", "71.7 (66.7 to 76.2)", "-19.1", "0.790", "undecided", "No alert is open.", "no clearance" })
        {
            Assert.Contains(text, run.Out, StringComparison.Ordinal);
        }
    }

    [Fact]
    public void Table_WithManyRejected_NamesTheAlertAndItsNumbers()
    {
        string lines = HarbourTown.Stream(60, river: 8, hill: 5) + string.Concat(Enumerable.Repeat("{\n", 40));
        ProgramRun run = ProgramRun.Replay(_charter, Grants(lines));
        Assert.Contains("page rejected-share: 0.4 (", run.Out, StringComparison.Ordinal);
        Assert.Contains("limit 0.05 (40 of 100 records rejected)", run.Out, StringComparison.Ordinal);
    }

    [Fact]
    public void Groups_BelowTheMinimumCell_AreWithheldWithEnoughOthersToHideThem()
    {
        string lines = HarbourTown.Stream(200, river: 8, hill: 5)
            + string.Concat(Enumerable.Range(0, 7).Select(i => HarbourTown.Record($"k{i}", 200 + i, "coast", i < 3 ? "fast_track" : "manual_review")));
        JsonObject document = ProgramRun.Replay(_charter, Grants(lines), "--json").Document;
        Assert.Equal(207, (long)Reading(document, "selection_rate", null)["count"]!);
        JsonObject coast = Reading(document, "selection_rate", "coast");
        Assert.True((bool)coast["suppressed"]!);
        Assert.Null(coast["count"]);
        Assert.False(coast.ContainsKey("value") && coast["value"] is not null);

        // Were both others published, the total would give the coast away.
        Assert.Contains(new[] { "river", "hill" }, group => Reading(document, "selection_rate", group)["suppressed"] is not null);
        JsonObject open = ProgramRun.Replay(_folder.Write("open.yaml", HarbourTown.Charter + "\nminimum_cell: 0\n"), Grants(lines), "--json").Document;
        Assert.Equal(7, (long)Reading(open, "selection_rate", "coast")["count"]!);
    }

    private static string Outcome(string id, double minute, string upheld) =>
        $$"""{"case":"{{id}}","decided_at":"{{HarbourTown.At(minute)}}","upheld":"{{upheld}}"}""" + "\n";

    private static byte[] Packed(string text)
    {
        using MemoryStream packed = new();
        using (GZipStream gzip = new(packed, CompressionLevel.Optimal, leaveOpen: true))
        {
            gzip.Write(Encoding.UTF8.GetBytes(text));
        }

        return packed.ToArray();
    }

    /// <summary>200 sound records, and one or more of everything that is counted apart.</summary>
    private static string Mixed() =>
        HarbourTown.Stream(199, river: 8, hill: 5)
        + HarbourTown.Record("w1", 190, "hill", "withdrawn")
        + HarbourTown.Record("n1", 198, "not_stated", "fast_track")
        + "{\"case\":\n"
        + "\n"
        + HarbourTown.Record("u1", 190, "hill", "maybe")
        + HarbourTown.Record("", 190, "hill", "fast_track")
        + """{"case":"b1","decided_at":"yesterday","language":"hill","decision":"fast_track"}""" + "\n"
        + """{"case":"b2","decided_at":"2031-03-01T09:00:00Z","language":"hill"}""" + "\n"
        + HarbourTown.Record("l1", 100, "hill", "fast_track")
        + HarbourTown.Record("c10", 199, "hill", "fast_track")
        + HarbourTown.Record("a1", 260, "river", "fast_track")
        + HarbourTown.Record("x1", 5000, "river", "fast_track");

    private static long Count(JsonObject document, string name) => (long)document["records"]![name]!;

    private static JsonObject Reading(JsonObject document, string measure, string? group) => document["readings"]!.AsArray()
        .Select(r => r!.AsObject())
        .Single(r => (string?)r["window"] == "all" && (string?)r["measure"] == measure && (string?)r["basis"] == "observed"
            && (string?)r["group"] == group);

    private string Grants(string lines) => _folder.Write("grants.ndjson", lines);

    private byte[] Snapshot(string name, string input, params string[] options)
    {
        Assert.Equal(0, ProgramRun.Replay([_charter, input, "--out", _folder.At(name), .. options]).ExitCode);
        return File.ReadAllBytes(_folder.At(name));
    }
}
