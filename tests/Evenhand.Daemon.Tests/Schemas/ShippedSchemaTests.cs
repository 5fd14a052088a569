using System.Globalization;
using System.Text;
using System.Text.Json.Nodes;
using Dapper;
using Evenhand.Daemon.Stores;
using Evenhand.Daemon.Stores.Sqlite;
using Evenhand.Daemon.Tests.Processes;
using Evenhand.Daemon.Tests.Replay;
using Evenhand.Daemon.Tests.Stores;
using Evenhand.Testing;
using Microsoft.Data.Sqlite;

namespace Evenhand.Daemon.Tests.Schemas;

/// <summary>What the program writes is as the schemas say that <c>evenhand schema</c> prints.</summary>
public sealed class ShippedSchemaTests : IDisposable
{
    private const string RichCharter = """
        charter: flood-grants
        title: Flood-repair grants
        owner: grants-platform
        runbook: https://runbook.example/flood
        labels: { team: quay }
        id: /case
        time: /at
        decision: { at: /decision, favourable: [fast], unfavourable: [slow], other: [withdrawn] }
        score: { at: /score, range: [0, 1] }
        outcome: { at: /upheld, positive: [true], negative: [false], within: 30d }
        slices: [{ name: version, at: /version }]
        groups:
          - { name: language, at: /language, values: [river, hill, coast], reference: river, declined: [not_stated] }
          - { name: age, at: /age, bands: [18, 40, 65, 88] }
        intersections: [[language, age]]
        inputs: [{ name: tenure, at: /tenure, values: [owner, tenant] }]
        windows: [1h, 24h, 10d]
        adjust: [{ field: tenure, why: rules differ by tenure }]
        baseline: 5d
        alerts:
          - { name: ratio, measure: impact_ratio, grouping: language, window: 10d, below: 0.8, severity: page, labels: { team: harbour } }
          - { name: strict, measure: selection_rate, window: 10d, above: 1% }
          - { name: shift, measure: selection_rate_gap, grouping: language, window: 24h, shift: 5pp }
          - { name: tenure-feed, measure: missing_rate, field: tenure, window: 24h, above: 90%, severity: info }
          - { name: quiet, no_records_for: 1d }
        """;

    private readonly WorkFolder _folder = new();

    public void Dispose() => _folder.Dispose();

    /// <summary>Charters and encoded records are held to theirs beside the parser and the decoder.</summary>
    [Fact]
    public void Schema_OfEveryFormat_IsPrintedAndTested()
    {
        string[] tested = ["charter", "circuit", "encoded-record", "run-log", "shard", "snapshot"];
        Assert.All(tested, format => Assert.Equal("https://json-schema.org/draft/2020-12/schema", (string?)JsonNode.Parse(Text(format))!["$schema"]));
        ProgramRun unknown = ProgramRun.Of("schema", "wages");
        Assert.Equal((2, ""), (unknown.ExitCode, unknown.Out));
        Assert.Equal(tested, Quoted(Assert.Single(unknown.ErrorLines)).Skip(1));
    }

    [Fact]
    public void Snapshot_OfAReplayWithEverything_IsValid()
    {
        JsonObject document = Replay(RichCharter, Decisions(3000), Outcomes(3000), "--as-of", "2031-03-20T00:00:00Z", "--signing-key", NewKey());
        Assert.Equal("", new ShippedSchema(Text("snapshot")).Errors(document));

        // Else the check shows little.
        HashSet<string> measures = [.. document["readings"]!.AsArray().Select(r => (string)r!["measure"]!)];
        Assert.Superset(new HashSet<string> { "impact_ratio", "adjusted_odds_ratio", "true_positive_rate_gap", "calibration_gap", "missing_rate", "odds_ratio", "other_rate" }, measures);
        Assert.Contains(document["readings"]!.AsArray(), r => r!["suppressed"] is not null);
        Assert.Contains(document["readings"]!.AsArray(), r => r!["slice"] is not null);
        Assert.Contains(document["readings"]!.AsArray(), r => r!["homogeneity_p"] is not null);
        Assert.NotEmpty(document["alerts"]!.AsArray());
        HashSet<string> states = [.. document["rules"]!.AsArray().Select(r => (string)r!["state"]!)];
        Assert.Superset(new HashSet<string> { "within", "beyond", "too_few" }, states);
        Assert.NotNull(document["outcomes"]);
        Assert.NotNull(document["signature"]);
    }

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    [InlineData(40)]
    public void Snapshot_OfFewOrNoRecords_IsValid(int records) =>
        Assert.Equal("", new ShippedSchema(Text("snapshot")).Errors(Replay(RichCharter, Decisions(records), Outcomes(records), "--as-of", "2031-03-20T00:00:00Z")));

    [Theory]
    [InlineData("mortgage", "hmda_boston_1990.csv")]
    [InlineData("credit", "german_credit_decoded.csv")]
    public void Snapshot_OfAnOpenDataSet_IsValid(string charter, string csv) =>
        Assert.Equal("", new ShippedSchema(Text("snapshot")).Errors(OpenData.Replay(charter, csv).Document));

    [Fact]
    public void Snapshot_WithAFeedOfLabels_IsValid()
    {
        string feed = _folder.Write("labels.ndjson", string.Concat(Enumerable.Range(0, 300).Select(i => $$"""{"id":"c{{i}}","tongue":"hill"}""" + "\n")));
        string charter = RichCharter.Replace("labels: { team: quay }", $"labels: {{ team: quay, file: {feed}, at: {{ language: /tongue }}, join: /id }}", StringComparison.Ordinal);
        JsonObject document = Replay(charter, Decisions(400), Outcomes(400), "--as-of", "2031-03-20T00:00:00Z");
        Assert.NotNull(document["labels"]);
        Assert.Equal("", new ShippedSchema(Text("snapshot")).Errors(document));
    }

    [Fact]
    public void RunLogAndShard_OfARunThatWasStoppedAndWentOn_AreValid()
    {
        using SqlitePlace place = new();
        using StoredReplay replay = new();
        ShippedSchema shard = new(Text("shard")), runLog = new(Text("run-log"));
        using (IStore store = place.Open())
        {
            replay.StopAfter(store, commits: 0);
            replay.StopAfter(store, commits: 4);
            Assert.Equal("", shard.Errors(JsonNode.Parse(place.Scalar<byte[]>("SELECT header FROM run"))));
            replay.Into(store);
        }

        using SqliteConnection connection = SqliteConnections.Reader(place.DatabaseFile);
        JsonObject[] entries =
        [
            .. connection.Query<(long Number, long Position, string Kind, string Body)>("SELECT number, position, kind, body FROM run_log ORDER BY number").Select(e =>
                new JsonObject { ["number"] = e.Number, ["position"] = e.Position, ["kind"] = e.Kind, ["body"] = JsonNode.Parse(e.Body) }),
        ];
        Assert.Equal(["started", "resumed", "resumed", "finished"], entries.Select(e => (string)e["kind"]!));
        Assert.All(entries, e => Assert.Equal("", runLog.Errors(e)));
        Assert.Equal([0L, 0L, 1000L, StoredReplay.Records], entries.Select(e => (long)e["position"]!));
    }

    [Fact]
    public void RunLogAndShard_WithAMemberThatIsWrong_AreNotValid()
    {
        ShippedSchema shard = new(Text("shard")), runLog = new(Text("run-log"));
        Assert.Equal("", shard.Errors(JsonNode.Parse(SampleCommits.At(1).Header.ToBytes())));
        foreach ((string key, string value) in new[] { ("format", "\"evenhand-shard/2\""), ("next_offsets", "[-1]"), ("ended", "[1]"), ("counts", "{\"read\":-1}"), ("check", "\"0\""), ("surprise", "1") })
        {
            JsonObject header = JsonNode.Parse(SampleCommits.At(1).Header.ToBytes())!.AsObject();
            header[key] = JsonNode.Parse(value);
            Assert.True(shard.Errors(header).Length > 0, key);
        }

        foreach ((string key, string value) in new[] { ("number", "0"), ("position", "-1"), ("position", "[1]"), ("kind", "\"lunch\""), ("body", "[]"), ("surprise", "1") })
        {
            JsonObject entry = new() { ["number"] = 1, ["position"] = 0, ["kind"] = "started", ["body"] = new JsonObject() };
            entry[key] = JsonNode.Parse(value);
            Assert.True(runLog.Errors(entry).Length > 0, key);
        }
    }

    [Fact]
    public void Circuit_AsLearnt_IsValid()
    {
        string circuit = _folder.At("circuit.json");
        ProgramRun run = ProgramRun.Of("learn", _folder.Write("charter.yaml", RichCharter), Decisions(600), "--profiles", "2", "--out", circuit);
        Assert.True(run.ExitCode == 0, run.Error);

        ShippedSchema schema = new(Text("circuit"));
        JsonObject document = JsonNode.Parse(File.ReadAllText(circuit))!.AsObject();
        Assert.Equal("", schema.Errors(document));
        Assert.NotNull(document["profile_circuit"]);
        document["nodes"]![0]!["surprise"] = 1;
        Assert.NotEqual("", schema.Errors(document));
    }

    /// <summary>Circuits of every kind of node, by hand; and what each kind must not lack.</summary>
    [Theory]
    [InlineData("""{"id":0,"variable":"smoker","p":[0.7,0.3]}""", true)]
    [InlineData("""{"id":0,"variable":"x","mean":0.0,"sd":1.0}""", true)]
    [InlineData("""{"id":4,"sum":[3,9],"weights":[0.4,0.6]}""", true)]
    [InlineData("""{"id":3,"product":[0,1]}""", true)]
    [InlineData("""{"id":3}""", false)]
    [InlineData("""{"id":3,"product":[0,1],"sum":[2],"weights":[1]}""", false)]
    [InlineData("""{"id":3,"variable":"x","mean":0.0}""", false)]
    [InlineData("""{"id":"3","product":[0,1]}""", false)]
    public void Circuit_WithANodeOfEachKind_IsValidOrNot(string node, bool isValid)
    {
        JsonObject circuit = new()
        {
            ["format"] = "evenhand-circuit/1",
            ["variables"] = JsonNode.Parse("""[{"name":"age","kind":"number","edges":[18,30,null]},{"name":"smoker","kind":"category","values":["no","yes"]},{"name":"x","kind":"number"}]"""),
            ["nodes"] = new JsonArray(JsonNode.Parse(node)),
            ["root"] = 0,
        };
        Assert.Equal(isValid, new ShippedSchema(Text("circuit")).Errors(circuit).Length == 0);
    }

    /// <summary>Times in order over 20 days, of which the last records are left out by the as-of; some of everything.</summary>
    private string Decisions(int count)
    {
        Random random = new(11);
        StringBuilder lines = new();
        for (int i = 0; i < count; i++)
        {
            string time = new DateTime(2031, 3, 1, 0, 0, 0, DateTimeKind.Utc).AddSeconds(i * 575L).ToString("yyyy-MM-ddTHH:mm:ssZ", CultureInfo.InvariantCulture);
            string language = Pick(random, "river", "hill", "coast", "hill", "river", "not_stated", "elvish", "");
            string decision = random.Next(100) == 0 ? "lost" : random.Next(20) == 0 ? "withdrawn" : random.Next(10) < (language == "hill" ? 3 : 7) ? "fast" : "slow";
            lines.AppendLine(CultureInfo.InvariantCulture, $$"""{"case":"c{{(random.Next(50) == 0 ? i / 2 : i)}}","at":"{{time}}","decision":"{{decision}}","score":{{random.NextDouble():R}},"version":"{{random.Next(3)}}","language":"{{language}}","age":{{random.Next(10, 90)}},"tenure":"{{Pick(random, "owner", "tenant", "")}}"}""");
        }

        return _folder.Write("decisions.ndjson", lines.ToString());
    }

    private string Outcomes(int count)
    {
        Random random = new(12);
        return _folder.Write("outcomes.ndjson", string.Concat(Enumerable.Range(0, count / 2).Select(i => $$"""{"case":"c{{i}}","upheld":{{Pick(random, "true", "false")}}}""" + "\n")));
    }

    private string NewKey()
    {
        using System.Security.Cryptography.ECDsa key = System.Security.Cryptography.ECDsa.Create(System.Security.Cryptography.ECCurve.NamedCurves.nistP256);
        return _folder.Write("key.pem", key.ExportECPrivateKeyPem());
    }

    private JsonObject Replay(string charter, string decisions, string outcomes, params string[] options)
    {
        ProgramRun run = ProgramRun.Replay([_folder.Write("charter.yaml", charter), decisions, "--outcomes", outcomes, "--json", .. options]);
        Assert.True(run.ExitCode == 0, run.Error);
        return run.Document;
    }

    private static string Text(string format)
    {
        ProgramRun run = ProgramRun.Of("schema", format);
        Assert.Equal((0, ""), (run.ExitCode, run.Error));
        return run.Out;
    }

    private static string[] Quoted(string line) => [.. line.Split('\'').Where((_, i) => i % 2 == 1)];

    private static string Pick(Random random, params string[] texts) => texts[random.Next(texts.Length)];
}
