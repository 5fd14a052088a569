using System.Globalization;
using System.Text;
using System.Text.Json.Nodes;
using Evenhand.Daemon.Tests.Processes;

namespace Evenhand.Daemon.Tests.Replay;

/// <summary>Group labels that come apart from the decisions: the same readings as if they had stood in the records.</summary>
public sealed class LabelFeedTests : IDisposable
{
    private const int Records = 400;
    private readonly WorkFolder _folder = new();

    public void Dispose() => _folder.Dispose();

    [Theory]
    [InlineData("labels.ndjson", "4096")]
    [InlineData("labels.ndjson", "7")]
    [InlineData("labels.csv", "1")]
    public void Replay_LabelsFromAFeed_GivesTheReadingsOfLabelsInTheRecords(string feed, string batch)
    {
        string whole = _folder.Write("whole.ndjson", HarbourTown.Stream(Records, river: 8, hill: 5));
        string bare = _folder.Write("bare.ndjson", Stripped());
        _folder.Write("labels.ndjson", Feed(i => i, (id, language, at) => $$"""{"id":"{{id}}","tongue":"{{language}}","decided_at":"{{at}}"}"""));
        _folder.Write("labels.csv", "id,tongue,decided_at\n" + Feed(i => i, (id, language, at) => $"{id},{language},{at}"));

        JsonObject stated = ProgramRun.Replay(Charter(null), whole, "--json").Document;
        JsonObject fed = ProgramRun.Replay(Charter(feed), bare, "--json", "--batch-size", batch).Document;
        Assert.Equal(stated["readings"]!.ToJsonString(), fed["readings"]!.ToJsonString());
        Assert.Equal($$"""{"duplicate":0,"filled":{{Records}},"kept":{{Records}},"late":0,"read":{{Records}},"rejected":0}""", fed["labels"]!.ToJsonString());
        Assert.Equal(0, (long)fed["records"]!["held"]!);
    }

    [Fact]
    public void Replay_LateDoubleAndOwnLabels_CountAsTheCharterSays()
    {
        string bare = _folder.Write(
            "bare.ndjson",
            HarbourTown.Record("own", 0, "river", "fast_track") + Bare("early", 1) + Bare("late", 2) + Bare("double", 3) + Bare("nobody", 4));
        _folder.Write(
            "labels.ndjson",
            string.Join('\n', Entry("own", "hill", 0), Entry("early", "hill", 1 + 9.9), Entry("late", "hill", 2 + 10.1), Entry("double", "hill", 3), Entry("double", "coast", 3), "{}", Entry("stranger", "hill", 0)));

        JsonObject fed = ProgramRun.Replay(Charter("labels.ndjson"), bare, "--json").Document;
        Assert.Equal("""{"duplicate":1,"filled":2,"kept":5,"late":1,"read":7,"rejected":1}""", fed["labels"]!.ToJsonString());
        Assert.Equal([1, 2, 0], ((string[])["river", "hill", "coast"]).Select(group => DecidedOf(fed, group)));
    }

    [Fact]
    public void Replay_LabelsAfterTheAsOf_AreNotKnownYet()
    {
        string bare = _folder.Write("bare.ndjson", Bare("a", 0) + Bare("b", 1));
        _folder.Write("labels.ndjson", Entry("a", "hill", 4) + "\n" + Entry("b", "hill", 6));

        JsonObject fed = ProgramRun.Replay(Charter("labels.ndjson"), bare, "--json", "--as-of", HarbourTown.At(5)).Document;
        Assert.Equal((1L, 1L), ((long)fed["labels"]!["filled"]!, (long)fed["labels"]!["late"]!));
    }

    [Fact]
    public void Replay_RevisionsOfOneCase_AllTakeItsLabel()
    {
        string lines = string.Concat(Enumerable.Range(1, 3).Select(n => Bare("a", n).Replace("}", $",\"n\":{n}}}", StringComparison.Ordinal)));
        _folder.Write("labels.ndjson", Entry("a", "hill", 0));

        JsonObject fed = ProgramRun.Replay(Charter("labels.ndjson", "revision: /n\n"), _folder.Write("bare.ndjson", lines), "--json").Document;
        Assert.Equal((3L, 3), ((long)fed["labels"]!["filled"]!, DecidedOf(fed, "hill")));
    }

    [Fact]
    public void Replay_AnotherFeed_IsAnotherRun()
    {
        string bare = _folder.Write("bare.ndjson", Stripped());
        string store = "sqlite:" + _folder.At("runs.db");
        _folder.Write("labels.ndjson", Entry("c0", "hill", 0));
        Assert.Equal(0, ProgramRun.Replay(Charter("labels.ndjson"), bare, "--store", store).ExitCode);
        _folder.Write("labels.ndjson", Entry("c0", "coast", 0));
        Assert.DoesNotContain("finished before", ProgramRun.Replay(Charter("labels.ndjson"), bare, "--store", store).Error, StringComparison.Ordinal);
        Assert.Contains("finished before", ProgramRun.Replay(Charter("labels.ndjson"), bare, "--store", store).Error, StringComparison.Ordinal);
    }

    private static string Bare(string id, double minute) => HarbourTown.Record(id, minute, "", "fast_track");

    private static string Entry(string id, string language, double minute) => $$"""{"id":"{{id}}","tongue":"{{language}}","decided_at":"{{HarbourTown.At(minute)}}"}""";

    private static int DecidedOf(JsonObject document, string group) => (int)document["readings"]!.AsArray()
        .Where(r => (string)r!["measure"]! == "selection_rate" && (string)r["basis"]! == "observed" && (string)r["window"]! == "all")
        .Single(r => (string?)r!["group"] == group)!["count"]!;

    /// <summary>The stream without labels.</summary>
    private static string Stripped() => HarbourTown.Stream(Records, river: 8, hill: 5)
        .Replace("\"language\":\"river\"", "\"language\":null", StringComparison.Ordinal)
        .Replace("\"language\":\"hill\"", "\"language\":\"\"", StringComparison.Ordinal);

    private static string Feed(Func<int, double> minute, Func<string, string, string, string> line)
    {
        StringBuilder lines = new();
        for (int i = 0; i < Records; i++)
        {
            lines.Append(CultureInfo.InvariantCulture, $"{line(HarbourTown.CaseOf(i), i % 2 == 0 ? "river" : "hill", HarbourTown.At(minute(i)))}\n");
        }

        return lines.ToString();
    }

    private string Charter(string? feed, string more = "")
    {
        string labels = feed is null ? "" : $"labels: {{ file: {feed}, at: {{ language: {(feed.EndsWith("csv", StringComparison.Ordinal) ? "tongue" : "/tongue")} }}, join: {(feed.EndsWith("csv", StringComparison.Ordinal) ? "id" : "/id")}, wait: 10m }}\n";
        string charter = HarbourTown.Charter + "\nminimum_cell: 0\n" + labels + more;
        if (feed?.EndsWith("csv", StringComparison.Ordinal) == true)
        {
            // The table's column has no slash, the records' place has.
            charter = charter.Replace("time: /decided_at", "time: [/decided_at, decided_at]", StringComparison.Ordinal);
        }

        return _folder.Write($"grants-{feed}.yaml", charter);
    }
}
