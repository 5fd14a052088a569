using System.Globalization;
using System.Text;
using System.Text.Json.Nodes;
using Evenhand.Daemon.Stores.Sqlite;
using Evenhand.Daemon.Tests.Processes;
using Evenhand.Monitoring.Snapshots;

namespace Evenhand.Daemon.Tests.Evidence;

/// <summary>What <c>evidence list|show|recompute|export</c> print of a sound chain, in a store and in an exported file.</summary>
public sealed class EvidenceCommandTests(EvidenceChain chain) : IClassFixture<EvidenceChain>
{
    [Fact]
    public void List_OfAStore_HasALineASnapshotThatAPersonReads()
    {
        ProgramRun run = Sound("list", "--store", chain.Store);
        Assert.Equal(EvidenceChain.Count, run.OutLines.Length);
        for (int i = 0; i < EvidenceChain.Count; i++)
        {
            string[] cells = run.OutLines[i].Split(' ', StringSplitOptions.RemoveEmptyEntries);
            string size = chain.Documents[i].Length.ToString("N0", CultureInfo.InvariantCulture);
            string[] expected = [$"{i + 1}", "replay", "flood-grants", (string)EvidenceChain.Json(chain.Documents[i])["as_of"]!, size, "bytes", chain.Heads[i]];
            Assert.Equal(expected, cells);
        }
    }

    [Fact]
    public void List_Json_IsTheSameOfStoreAndFile()
    {
        JsonArray rows = Sound("list", "--json", "--store", chain.Store).Document["snapshots"]!.AsArray();
        Assert.Equal([1L, 2L, 3L, 4L], rows.Select(r => (long)r!["sequence"]!));
        Assert.Equal(chain.Heads, rows.Select(r => (string)r!["sha256"]!));
        Assert.Equal(chain.Documents.Select(d => d.Length), rows.Select(r => (int)r!["bytes"]!));
        Assert.Equal(["as_of", "bytes", "charter", "created_at", "kind", "sequence", "sha256"], rows[0]!.AsObject().Select(p => p.Key).Order(StringComparer.Ordinal));
        Assert.Equal(rows.ToJsonString(), Sound("list", chain.File, "--json").Document["snapshots"]!.ToJsonString());
    }

    [Fact]
    public void Show_OfAStoreAndAFile_PrintsTheTablesOfThatSnapshot()
    {
        ProgramRun store = Sound("show", "3", "--store", chain.Store), file = Sound("show", "3", chain.File);
        Assert.StartsWith("flood-grants as of 2031-03-01T11:00:00Z: 400 records read (100 excluded, 300 used)", store.Out, StringComparison.Ordinal);
        foreach (string text in new[] { "Window 24h, all: 300 records", "language", "river", "80.0 (", "50.0 (", "is no clearance" })
        {
            Assert.Contains(text, store.Out, StringComparison.Ordinal);
        }

        Assert.Equal(store.Out, file.Out);
    }

    [Fact]
    public void Show_Json_IsTheStoredDocumentByteForByte()
    {
        Assert.Equal(Encoding.UTF8.GetString(chain.Documents[1]) + "\n", Sound("show", "2", "--json", "--store", chain.Store).Out);
        Assert.Equal(Encoding.UTF8.GetString(chain.Documents[1]) + "\n", Sound("show", "2", "--json", chain.File).Out);
    }

    [Theory]
    [InlineData(1)]
    [InlineData(4)]
    public void Recompute_OfASoundSnapshot_DerivesEveryReadingAgain(int sequence)
    {
        JsonArray readings = EvidenceChain.Json(chain.Documents[sequence - 1])["readings"]!.AsArray();
        int withheld = readings.Count(r => ((string?)r!["note"])?.Contains("withheld", StringComparison.Ordinal) == true);
        string number = sequence.ToString(CultureInfo.InvariantCulture);

        ProgramRun store = Sound("recompute", number, "--store", chain.Store);
        JsonObject json = Sound("recompute", number, chain.File, "--json").Document;

        Assert.StartsWith($"{readings.Count - withheld:N0} readings derived again, 0 differ", Assert.Single(store.OutLines), StringComparison.Ordinal);
        Assert.Equal((readings.Count - withheld, withheld, 0), ((int)json["compared"]!, (int)json["not_recomputable"]!, json["differences"]!.AsArray().Count));
    }

    /// <summary>Sealed anew, so that only the state gives it away.</summary>
    [Fact]
    public void Recompute_OfAReadingThatWasChanged_NamesItAndExitsOne()
    {
        JsonObject document = EvidenceChain.Json(chain.Documents[0]);
        JsonNode reading = document["readings"]!.AsArray().First(r => (string?)r!["measure"] == "selection_rate" && (string?)r["window"] == "all" && (string?)r["group"] == "hill")!;
        reading["value"] = 0.9;
        string file = chain.Write("changed.ndjson", [SnapshotSeal.Seal(document, 1, SnapshotSeal.Genesis).Bytes]);
        Assert.Equal(0, Run("verify", file).ExitCode);

        ProgramRun text = Run("recompute", "1", file), json = Run("recompute", "1", file, "--json");

        Assert.Equal((1, "", 1, ""), (text.ExitCode, text.Error, json.ExitCode, json.Error));
        Assert.Equal(2, text.OutLines.Length);
        Assert.Contains("selection_rate observed language hill", text.OutLines[0], StringComparison.Ordinal);
        Assert.Contains("value is stated as 0.9, derived as 0.5", text.OutLines[0], StringComparison.Ordinal);
        Assert.EndsWith("1 differ", text.OutLines[1], StringComparison.Ordinal);
        Assert.Equal(text.OutLines[0], (string?)Assert.Single(json.Document["differences"]!.AsArray()));
    }

    [Fact]
    public void Export_OfAStoreAndOfAnExport_IsTheDocumentsByteForByte()
    {
        string expected = string.Concat(chain.Documents.Select(d => Encoding.UTF8.GetString(d) + "\n"));
        Assert.Equal(expected, Sound("export", "--store", chain.Store).Out);
        Assert.Equal(expected, Sound("export", chain.File).Out);
        Assert.Equal("", Sound("export", "--store", chain.Store, "--out", chain.At("export.ndjson")).Out);
        Assert.Equal(expected, File.ReadAllText(chain.At("export.ndjson")));
    }

    [Fact]
    public void Export_WithoutState_LeavesOutTheStateAloneAndStillVerifies()
    {
        string file = chain.At("stateless.ndjson");
        Sound("export", "--store", chain.Store, "--without-state", "--out", file);

        string[] lines = File.ReadAllLines(file);
        Assert.Equal(EvidenceChain.Count, lines.Length);
        for (int i = 0; i < lines.Length; i++)
        {
            JsonObject whole = EvidenceChain.Json(chain.Documents[i]);
            Assert.True(whole.Remove("state"));
            Assert.True(JsonNode.DeepEquals(whole, JsonNode.Parse(lines[i])));
        }

        ProgramRun verified = Sound("verify", file, "--head", chain.Heads[^1], "--public-key", chain.PublicKey);
        Assert.Equal($"{file}: 4 snapshots verified, head {chain.Heads[^1]}", Assert.Single(verified.OutLines));
        Assert.Equal(File.ReadAllText(file), Sound("export", file, "--without-state").Out);
        Assert.Equal(Sound("show", "2", chain.File).Out, Sound("show", "2", file).Out);
        Fails(2, "the snapshot carries no state", "recompute", "2", file);
    }

    /// <summary>A store whose only run has not finished has no snapshot yet, which is nothing wrong.</summary>
    [Fact]
    public void List_OfAStoreWithoutSnapshots_SaysThatTheChainIsEmpty()
    {
        string file = chain.At("unfinished.db"), store = $"sqlite:{file}";
        using (SqliteStore opened = SqliteStore.Open(file))
        {
            opened.OpenRun(new string('a', 64), "flood-grants");
        }

        Assert.Equal("The chain is empty.\n", Sound("list", "--store", store).Out);
        Assert.Equal("""{"snapshots":[]}""" + "\n", Sound("list", "--store", store, "--json").Out);
        Assert.Equal($"{store}: the chain is empty\n", Sound("verify", "--store", store).Out);
        Assert.Equal("""{"intact":true,"verified":0,"head":null,"faults":[]}""" + "\n", Sound("verify", "--store", store, "--json").Out);
        Assert.Equal("", Sound("export", "--store", store).Out);
        Fails(2, "holds no snapshot 1", "show", "1", "--store", store);
    }

    [Fact]
    public void Show_OfASequenceThatIsNotThere_PointsToTheList()
    {
        Fails(2, "holds no snapshot 9; evidence list shows which there are", "show", "9", "--store", chain.Store);
        Fails(2, "holds no snapshot 9; evidence list shows which there are", "recompute", "9", chain.File);
        Fails(2, "SEQ 'two': not a whole number from 1", "show", "two", chain.File);
    }

    [Fact]
    public void Evidence_WithoutOneChain_SaysWhatToGive()
    {
        Fails(2, "--store sqlite:FILE, or an exported file", "list");
        Fails(2, "not both", "verify", chain.File, "--store", chain.Store);
        Fails(2, "no such file", "verify", chain.At("nothing.ndjson"));
        Fails(2, "cannot be read", "list", Path.GetDirectoryName(chain.File)!);
        Fails(2, "write sqlite:FILE", "list", "--store", "evidence.db");
        Fails(3, "no such store", "list", "--store", $"sqlite:{chain.At("nothing.db")}");
        Fails(3, "cannot be written", "export", chain.File, "--out", chain.At("none/export.ndjson"));
        Fails(2, "see evenhand evidence show --help", "show");
    }

    /// <summary>Files that hold something else: named, and never taken for snapshots.</summary>
    [Theory]
    [InlineData("not JSON at all")]
    [InlineData("[1,2]")]
    [InlineData("")]
    [InlineData("""{"sequence":1,"sequence":1}""")]
    public void Evidence_OfALineThatIsNoSnapshot_ExitsOne(string line)
    {
        string file = chain.Write("other.ndjson", [Encoding.UTF8.GetBytes(line)]);
        Fails(1, "holds no snapshot; evidence verify names it", "list", file);
        Fails(1, "holds no snapshot; evidence verify names it", "export", file, "--without-state");
        Fails(2, "holds no snapshot 1", "show", "1", file);
        ProgramRun verified = Run("verify", file);
        Assert.Equal((1, ""), (verified.ExitCode, verified.Error));
        Assert.StartsWith("Line 1, where snapshot 1 is due: ", verified.OutLines[0], StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("""{"sequence":1}""")]
    [InlineData("""{"charter":7,"sequence":1}""")]
    [InlineData("""{"charter":{"id":[],"text":7},"coverage":{},"readings":3,"records":[],"sequence":1,"state":{}}""")]
    public void Evidence_OfADocumentLaidOutOtherwise_ExitsOne(string line)
    {
        string file = chain.Write("odd.ndjson", [Encoding.UTF8.GetBytes(line)]);
        Fails(1, "not laid out as this program writes it", "show", "1", file);
        Assert.InRange(Run("recompute", "1", file).ExitCode, 1, 2);
        Assert.InRange(Run("list", file).ExitCode, 0, 1);
        Assert.Equal(1, Run("verify", file).ExitCode);
    }

    private static ProgramRun Run(params string[] args) => ProgramRun.Of(["evidence", .. args]);

    private static ProgramRun Sound(params string[] args)
    {
        ProgramRun run = Run(args);
        Assert.Equal((0, ""), (run.ExitCode, run.Error));
        return run;
    }

    private static void Fails(int exitCode, string saying, params string[] args)
    {
        ProgramRun run = Run(args);
        Assert.Equal((exitCode, ""), (run.ExitCode, run.Out));
        string line = Assert.Single(run.ErrorLines);
        Assert.StartsWith("evenhand: ", line, StringComparison.Ordinal);
        Assert.Contains(saying, line, StringComparison.Ordinal);
        Assert.DoesNotContain("unexpectedly", line, StringComparison.Ordinal);
    }
}
