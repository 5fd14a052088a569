using System.Text;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Tests.Windows;

/// <summary>A record of the tests' charter, in the clear.</summary>
public sealed record SampleRecord(
    long Time,
    int Id,
    int Language,
    int Age,
    int Tenure,
    DecisionCode Decision,
    OutcomeCode Outcome = OutcomeCode.Unknown,
    long Score = RecordBatch.MissingScore,
    string Version = "1");

/// <summary>A small charter (two groups, one input, a score, an outcome, a slice) and streams of records for it.</summary>
public static class SampleStream
{
    /// <summary>2031-03-30T00:00:00Z, the day on which clocks change in much of Europe.</summary>
    public const long Start = 1_932_595_200_000_000;

    public static Charter Charter(string timeZone = "Etc/UTC", int minimumCell = 0, int? reference = 0) => new()
    {
        Id = "flood-grants",
        Title = "Flood-repair grants",
        TimeZone = timeZone,
        RecordId = new FieldPath(["/case"]),
        Time = new TimeField(new FieldPath(["/at"]), TimeUnit.Rfc3339),
        Decision = new DecisionField(new FieldPath(["/decision"]), ["fast"], ["slow"], ["withdrawn"]),
        Score = new ScoreField(new FieldPath(["/score"]), 0, 1),
        Outcome = new OutcomeField(new FieldPath(["/upheld"]), ["yes"], ["no"], Duration("30d", 30), OutcomeObservation.Any),
        Slices = [new SliceField("version", new FieldPath(["/version"]), null)],
        Groups =
        [
            new GroupField { Name = "language", At = new FieldPath(["/language"]), Values = ["river", "hill", "coast"], Declined = ["not_stated"], Reference = reference },
            new GroupField { Name = "age", At = new FieldPath(["/age"]), Bands = [18, 40], Reference = reference },
        ],
        Groupings = [new Grouping("language", [0]), new Grouping("age", [1]), new Grouping("language+age", [0, 1])],
        Inputs = [new InputField { Name = "tenure", At = new FieldPath(["/tenure"]), Values = ["owner", "tenant"] }],
        Windows = [new CharterDuration("1h", TimeSpan.FromHours(1)), new CharterDuration("24h", TimeSpan.FromHours(24)), Duration("10d", 10)],
        Adjust = [new AdjustField("tenure", null)],
        MinimumCell = minimumCell,
    };

    public static CharterDuration Duration(string text, int days) => new(text, TimeSpan.FromDays(days));

    /// <summary>Records spread over a stretch in no order, with every special code.</summary>
    public static List<SampleRecord> Random(int seed, int count, long stretch, int ids = int.MaxValue)
    {
        Random random = new(seed);
        List<SampleRecord> records = [];
        for (int i = 0; i < count; i++)
        {
            records.Add(new SampleRecord(
                Start + random.NextInt64(stretch),
                ids == int.MaxValue ? i : random.Next(ids),
                random.Next(6),
                random.Next(4),
                random.Next(4),
                (DecisionCode)(random.Next(20) == 0 ? 2 : random.Next(2)),
                (OutcomeCode)random.Next(3),
                random.Next(9) switch { 0 => RecordBatch.MissingScore, 1 => RecordBatch.UnlistedScore, _ => random.NextInt64(RecordBatch.ScoreUnit + 1) },
                $"{random.Next(11)}"));
        }

        return records;
    }

    /// <summary>Feeds records to a shard in batches.</summary>
    public static void Feed(Shard shard, Charter charter, IEnumerable<SampleRecord> records, int batchSize = 4096, long from = 0)
    {
        RecordBatch batch = new(new RecordLayout(charter), batchSize);
        long position = from;
        foreach (SampleRecord[] chunk in records.Chunk(batchSize))
        {
            batch.Clear();
            foreach (SampleRecord record in chunk)
            {
                Put(batch, record, position++);
            }

            shard.Add(batch, 0);
        }
    }

    public static Shard NewShard(Charter charter, ShardOptions? options = null, OutcomeIndex? outcomes = null) =>
        new(new SumLayout(charter), 1, options ?? new ShardOptions(), outcomes);

    private static void Put(RecordBatch batch, SampleRecord record, long position)
    {
        int at = batch.Count;
        batch.Times[at] = record.Time;
        batch.Ids[at] = batch.CaseIds[at] = new IdHash(unchecked((ulong)record.Id * 0x9E3779B97F4A7C15), (ulong)record.Id);
        batch.Decisions[at] = record.Decision;
        batch.Outcomes[at] = record.Outcome;
        batch.Scores[at] = record.Score;
        batch.CodesOf(at)[0] = (ushort)record.Language;
        batch.CodesOf(at)[1] = (ushort)record.Age;
        batch.CodesOf(at)[2] = (ushort)record.Tenure;
        batch.SetSlice(0, Encoding.UTF8.GetBytes(record.Version));
        batch.Accept(position);
    }
}
