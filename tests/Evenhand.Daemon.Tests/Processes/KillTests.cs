using System.Globalization;
using System.Text;
using Evenhand.Daemon.Stores.Sqlite;
using Microsoft.Data.Sqlite;

namespace Evenhand.Daemon.Tests.Processes;

/// <summary>A replay into a store, killed at random moments: the final snapshot is that of an undisturbed run, to the bit.</summary>
public sealed class KillTests : IDisposable
{
    private const int Kills = 50;
    private const int Records = 60_000;

    private static readonly string[] Languages = ["river", "hill", "coast", ""];

    private readonly string _folder = Directory.CreateTempSubdirectory("evenhand-kill").FullName;

    // The latest moment to kill at. It follows the machine's speed, which other work changes: were it fixed, a slow machine
    // would only ever be killed while it starts.
    private TimeSpan _latest;

    [Fact]
    public void Replay_KilledFiftyTimesAtRandomMoments_EndsInTheSameSnapshot()
    {
        WriteCharter();
        WriteRecords();
        long begun = TimeProvider.System.GetTimestamp();
        ProgramRun undisturbed = ProgramRun.Of(Arguments("undisturbed.json", store: null));
        _latest = TimeProvider.System.GetElapsedTime(begun);
        Assert.True(undisturbed.ExitCode == 0, undisturbed.Error);
        byte[] expected = File.ReadAllBytes(At("undisturbed.json"));

        Random random = new(20311130);
        int kills = 0, quota = Kills, rounds = 0, resumed = 0;

        // Many kills must have hit a run with something stored, or the test shows little.
        while (kills < Kills || resumed <= Kills / 4)
        {
            Assert.True(kills < 10 * Kills, $"{resumed} of {kills} kills left something to go on with");
            string store = At($"round{rounds++}.db");
            resumed += KillUntilDone(store, random, quota, ref kills);
            quota = Math.Max(quota, kills + 5);
            byte[] actual = File.ReadAllBytes(At("killed.json"));
            Assert.Equal(Encoding.UTF8.GetString(expected), Encoding.UTF8.GetString(actual));
            AssertNothingLostOrDoubled(store);
        }
    }

    public void Dispose() => Directory.Delete(_folder, recursive: true);

    private int KillUntilDone(string store, Random random, int quota, ref int kills)
    {
        File.Delete(At("killed.json"));
        while (true)
        {
            using EvenhandProcess process = EvenhandProcess.Start(Arguments("killed.json", store));
            if (process.Ends(kills < quota ? _latest * (0.3 + (0.7 * random.NextDouble())) : TimeSpan.FromMinutes(2)))
            {
                Assert.Equal(0, process.ExitCode);
                _latest *= 0.85;
                return Count(store, "SELECT count(*) FROM run_log WHERE kind = 'resumed' AND position > 0");
            }

            process.Kill();
            kills++;
            _latest *= 1.05;
        }
    }

    private void AssertNothingLostOrDoubled(string store)
    {
        Assert.Equal(1, Count(store, "SELECT count(*) FROM snapshot"));
        Assert.Equal(1, Count(store, "SELECT count(*) FROM run WHERE sequence = 1"));
        Assert.Equal(0, Count(store, "SELECT count(*) FROM bucket"));
        Assert.Equal(Records / 100, Count(store, "SELECT count(*) FROM rejected WHERE reason = 'unknown_decision'"));
        Assert.Equal((Records / 100) - 1, Count(store, "SELECT count(DISTINCT position) FROM rejected WHERE position > 0 AND reason = 'unknown_decision'"));
    }

    private static int Count(string store, string sql)
    {
        using SqliteConnection connection = SqliteConnections.Reader(store);
        using SqliteCommand command = connection.CreateCommand();
        command.CommandText = sql;
        return Convert.ToInt32(command.ExecuteScalar(), CultureInfo.InvariantCulture);
    }

    private string[] Arguments(string snapshot, string? store) =>
    [
        "replay", At("charter.yaml"), At("decisions.ndjson"), "--out", At(snapshot), "--outcomes", At("outcomes.ndjson"), "--commit-every", "2000", "--batch-size", "500",
        .. store is null ? Array.Empty<string>() : ["--store", $"sqlite:{store}"],
    ];

    private string At(string name) => Path.Combine(_folder, name);

    private void WriteCharter() => File.WriteAllText(
        At("charter.yaml"),
        """
        charter: flood-grants
        id: /case
        time: /at
        decision: { at: /decision, favourable: [fast], unfavourable: [slow], other: [withdrawn] }
        score: { at: /score, range: [0, 1] }
        outcome: { at: /upheld, positive: [true], negative: [false], within: 30d }
        slices: [{ name: version, at: /version }]
        groups:
          - { name: language, at: /language, values: [river, hill, coast], reference: river }
          - { name: age, at: /age, bands: [18, 40, 65], reference: 18..40 }
        intersections: [[language, age]]
        windows: [1h, 24h, 30d]
        """);

    /// <summary>Times in no order over 20 days, one id in ten repeated, one record in a hundred rejected.</summary>
    private void WriteRecords()
    {
        Random random = new(7);
        using StreamWriter decisions = new(At("decisions.ndjson")), outcomes = new(At("outcomes.ndjson"));
        for (int i = 0; i < Records; i++)
        {
            DateTime time = new DateTime(2031, 3, 1, 0, 0, 0, DateTimeKind.Utc).AddSeconds(random.Next(20 * 86400));
            string decision = i % 100 == 0 ? "lost" : random.Next(30) == 0 ? "withdrawn" : random.Next(2) == 0 ? "fast" : "slow";
            int id = random.Next(10) == 0 ? random.Next(i + 1) : i;
            decisions.WriteLine(string.Create(
                CultureInfo.InvariantCulture,
                $$"""{"case":"c{{id}}","at":"{{time:yyyy-MM-ddTHH:mm:ssZ}}","decision":"{{decision}}","score":{{random.NextDouble():R}},"version":"{{random.Next(3)}}","language":"{{Languages[random.Next(4)]}}","age":{{random.Next(18, 90)}}}"""));
            if (i % 3 == 0)
            {
                outcomes.WriteLine(string.Create(CultureInfo.InvariantCulture, $$"""{"case":"c{{i}}","upheld":{{(random.Next(2) == 0 ? "true" : "false")}}}"""));
            }
        }
    }
}
