using System.Globalization;
using Evenhand.Monitoring.Alerts;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Benchmarks;

/// <summary>One tick over 60 groups and three windows, without and with slices of everything else.</summary>
internal static class TickBenchmark
{
    public static void Run()
    {
        Charter charter = new()
        {
            Id = "flood-grants",
            Title = "Flood-repair grants",
            Decision = new DecisionField(new FieldPath(["/d"]), ["f"], ["u"], []),
            Groups = [new GroupField { Name = "quarter", At = new FieldPath(["/q"]), Values = [.. Enumerable.Range(0, 60).Select(i => $"q{i}")], Reference = 0 }],
            Groupings = [new Grouping("quarter", [0])],
            Windows = [new CharterDuration("1h", TimeSpan.FromHours(1)), new CharterDuration("24h", TimeSpan.FromHours(24)), new CharterDuration("30d", TimeSpan.FromDays(30))],
        };
        SumLayout layout = new(charter);
        Shard[] shards = [.. Enumerable.Range(0, 8).Select(s => Fill(charter, layout, s))];
        long asOf = shards.Max(s => s.Newest!.Value) + 1;
        int readings = 0;
        double one = Median.Seconds(21, () => readings = new Tick(layout, shards[..1]).At(asOf, shards[0].Counts, withAll: false).Readings.Count)[0];
        double eight = Median.Seconds(21, () => new Tick(layout, shards).At(asOf, shards[0].Counts, withAll: false))[0];
        Console.WriteLine(string.Create(CultureInfo.InvariantCulture, $"60 groups x 3 windows, {readings} readings: {one * 1e3:0.0} ms with 1 shard, {eight * 1e3:0.0} ms with 8"));
    }

    private static Shard Fill(Charter charter, SumLayout layout, int seed)
    {
        Random random = new(seed);
        Shard shard = new(layout, 1, new ShardOptions());
        RecordBatch batch = new(new RecordLayout(charter), 1000);
        const long Start = 1_932_595_200_000_000;
        for (int b = 0; b < 200; b++)
        {
            batch.Clear();
            for (int i = 0; i < 1000; i++)
            {
                batch.Times[i] = Start + random.NextInt64(31 * EventTime.Day);
                batch.Decisions[i] = (DecisionCode)random.Next(2);
                batch.Scores[i] = RecordBatch.MissingScore;
                batch.CodesOf(i)[0] = (ushort)random.Next(60);
                batch.Accept((b * 1000) + i);
            }

            shard.Add(batch, 0);
        }

        return shard;
    }
}
