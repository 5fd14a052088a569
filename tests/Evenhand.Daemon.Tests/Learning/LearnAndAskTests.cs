using System.Globalization;
using System.Text.Json.Nodes;
using Evenhand.Daemon.Tests.Processes;
using Evenhand.Daemon.Tests.Replay;
using Evenhand.Testing;

namespace Evenhand.Daemon.Tests.Learning;

/// <summary><c>learn</c> on open data with missing values, and <c>ask</c> of what it wrote, through the built program.</summary>
public sealed class LearnAndAskTests : IDisposable
{
    private const string StopsCharter = """
        charter: stops
        inputs:
          - { name: problem, at: problem, values: [suspicious, traffic] }
          - { name: search, at: person_search, values: ["YES", "NO"] }
          - { name: vehicle, at: vehicle_search, values: ["YES", "NO"] }
          - { name: race, at: race, values: [White, Black, Latino, East African, Native American, Asian, Other], missing: [Unknown] }
          - { name: gender, at: gender, values: [Male, Female], missing: [Unknown] }
          - { name: precinct, at: precinct, quantiles: 4 }
        """;

    private readonly WorkFolder _folder = new();

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void Learn_OpenDataWithMissingValues_BeatsBothYardsticksAndAnswersEvidence()
    {
        string circuit = _folder.At("stops.json");
        string sample = _folder.Write("stops.csv", string.Join('\n', File.ReadLines(TestData.Path("minneapolis_stops_2017.csv")).Take(8001)));
        ProgramRun learned = ProgramRun.Of("learn", _folder.Write("stops.yaml", StopsCharter), sample, "--out", circuit, "--profiles", "8", "--holdout", "0.2", "--json");
        JsonObject report = learned.Document;

        Assert.Equal((8000, 6, 8), ((int)report["records"]!, (int)report["fields"]!, (int)report["profiles"]!));
        double of(string key) => (double)report["held_out"]![key]!;
        Assert.True(of("log_likelihood") > of("independence") + 0.05);
        Assert.True(of("log_likelihood") > of("tree") - 0.02);
        Assert.True((double)report["missing"]!["gender"]! > 0.1);

        JsonObject whole = ProgramRun.Of("ask", circuit, "--of", "problem", "gender", "--given", "search=YES", "--json").Document;
        Assert.Equal(1, whole["distributions"]!["problem"]!.AsObject().Sum(p => (double)p.Value!), 1e-12);
        Assert.Equal(Math.Log((double)whole["evidence"]!), (double)whole["log_evidence"]!, 1e-12);

        // P(problem | search) by two questions about evidence.
        double joint = (double)ProgramRun.Of("ask", circuit, "--log-likelihood", "--given", "search=YES", "--given", "problem=traffic", "--json").Document["evidence"]!;
        Assert.Equal(joint / (double)whole["evidence"]!, (double)whole["distributions"]!["problem"]!["traffic"]!, 1e-12);
    }

    [Fact]
    public void Learn_TheSameSeed_WritesTheSameBytes()
    {
        string charter = _folder.Write("grants.yaml", HarbourTown.Charter + "\ninputs:\n  - { name: case, at: /case, values: [c0, c1, c2] }\n");
        string sample = _folder.Write("sample.ndjson", HarbourTown.Stream(400, river: 8, hill: 5));
        ProgramRun.Of("learn", charter, sample, "--out", _folder.At("a.json"), "--profiles", "3");
        ProgramRun.Of("learn", charter, sample, "--out", _folder.At("b.json"), "--profiles", "3");

        Assert.Equal(File.ReadAllBytes(_folder.At("a.json")), File.ReadAllBytes(_folder.At("b.json")));
        JsonObject answer = ProgramRun.Of("ask", _folder.At("a.json"), "--of", "decision", "--given", "language=river", "--json").Document;
        Assert.InRange((double)answer["distributions"]!["decision"]!["favourable"]!, 0.75, 0.85);
    }

    [Theory]
    [InlineData("age=30..45", "no", 0.4 * 0.5 / ((0.4 * 0.5) + (0.6 * 0.3)))]
    [InlineData("age=18..45", "no", 0.4 * 0.7 / ((0.4 * 0.7) + (0.6 * 0.9)))]
    [InlineData("age=20", "no", 0.4 * 0.2 / ((0.4 * 0.2) + (0.6 * 0.6)))]
    [InlineData("age=..30", "no", 0.4 * 0.2 / ((0.4 * 0.2) + (0.6 * 0.6)))]
    [InlineData("smoker=no|yes", "no", 0.4)]
    public void Ask_SetAndIntervalEvidence_IsBayesRule(string evidence, string value, double expected)
    {
        JsonObject answer = ProgramRun.Of("ask", Small(), "--given", evidence, "--of", "smoker", "--json").Document;

        Assert.Equal(expected, (double)answer["distributions"]!["smoker"]![value]!, 1e-14);
        Assert.Equal(["evidence", "log_evidence", "distributions"], answer.Select(a => a.Key));
    }

    [Theory]
    [InlineData("is no evidence", "--given", "age", "--of", "age")]
    [InlineData("begins and ends on its edges, which are 18, 30, 45, 60", "--given", "age=20..45", "--of", "smoker")]
    [InlineData("probability zero", "--given", "age=18..30", "--given", "age=45..60", "--of", "smoker")]
    [InlineData("is no variable of the circuit", "--of", "height")]
    [InlineData("is a category and has no mean", "--mean", "smoker")]
    [InlineData("needs a deterministic circuit", "--most-likely")]
    [InlineData("say what to ask", "--given", "age=20")]
    [InlineData("no such file", "--divergence", "nowhere.json")]
    public void Ask_WhatCannotBeAnswered_IsOneLine(string message, params string[] arguments)
    {
        ProgramRun run = ProgramRun.Of(["ask", Small(), .. arguments]);

        Assert.Equal(2, run.ExitCode);
        Assert.Contains(message, Assert.Single(run.ErrorLines), StringComparison.Ordinal);
    }

    [Fact]
    public void Ask_ForPeople_PrintsTables()
    {
        ProgramRun run = ProgramRun.Of("ask", Small(), "--of", "smoker", "--mean", "age");

        Assert.Equal(0, run.ExitCode);
        Assert.Contains("smoker", run.Out, StringComparison.Ordinal);
        Assert.Contains(string.Create(CultureInfo.InvariantCulture, $"{0.6}"), run.Out, StringComparison.Ordinal);
    }

    /// <summary>Two ages by whether somebody smokes; not deterministic, because both parts know every age.</summary>
    private string Small() => _folder.Write("small.json", """
        { "format": "evenhand-circuit/1",
          "variables": [ {"name": "age", "kind": "number", "edges": [18, 30, 45, 60]}, {"name": "smoker", "kind": "category", "values": ["no", "yes"]} ],
          "nodes": [ {"id": 0, "variable": "smoker", "p": [1, 0]}, {"id": 7, "variable": "smoker", "p": [0, 1]},
                     {"id": 1, "variable": "age", "p": [0.2, 0.5, 0.3]}, {"id": 2, "variable": "age", "p": [0.6, 0.3, 0.1]},
                     {"id": 8, "sum": [2, 2], "weights": [0.5, 0.5]},
                     {"id": 3, "product": [0, 1]}, {"id": 9, "product": [7, 8]}, {"id": 4, "sum": [3, 9], "weights": [0.4, 0.6]} ],
          "root": 4 }
        """);
}
