using System.Globalization;
using System.Text;
using Evenhand.Daemon.Replay;
using Evenhand.Daemon.Sources;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Benchmarks;

/// <summary>Records of 20 fields from a file to a snapshot, and to batches alone, beside a bare scan of the same file's JSON tokens; one thread.</summary>
internal static class ReplayBenchmark
{
    private static readonly string[] Languages = ["river", "hill", "coast"];

    public static void Run(int records)
    {
        string folder = Directory.CreateTempSubdirectory("evenhand-bench").FullName;
        try
        {
            string file = Path.Combine(folder, "decisions.ndjson"), charterFile = Path.Combine(folder, "charter.yaml");
            Write(file, records);
            File.WriteAllText(charterFile, CharterText());
            Charter charter = CharterParser.Parse(charterFile, File.ReadAllBytes(charterFile)).Charter!;
            double[] seconds = Median.Seconds(
                5,
                () => TokenScan.Count(file),
                () => Decode(file, charter),
                () => new ReplayRun(charter, new ReplayRequest { Charter = charterFile, Inputs = [file] }, TimeProvider.System, null).RunAlone());
            Console.WriteLine(string.Create(CultureInfo.InvariantCulture, $"{records:N0} records, {new FileInfo(file).Length / (double)records:0} bytes each"));
            foreach ((string name, double s) in ((string[])["token scan", "file to batches", "file to snapshot"]).Zip(seconds))
            {
                Console.WriteLine(string.Create(CultureInfo.InvariantCulture, $"{name,-17} {records / s / 1e3,8:0} k records/s   {seconds[0] / s:0.00} of the scan's rate"));
            }

            Allocations(file, charter);
            AllocationsOfKnownMinutes(file, charter with { RecordId = null });
        }
        finally
        {
            Directory.Delete(folder, recursive: true);
        }
    }

    private static void Decode(string file, Charter charter)
    {
        RecordLayout layout = new(charter);
        RecordBatch batch = new(layout, 4096);
        using RecordFile source = RecordFile.Open(file, charter, layout, new IdHasher(new byte[IdHasher.KeyLength]), RecordKind.Decision);
        while (source.Fill(batch))
        {
            batch.Clear();
        }
    }

    /// <summary>Bytes allocated by decoding and adding the second half of the file, when everything has been made that is needed.</summary>
    private static void Allocations(string file, Charter charter)
    {
        SumLayout layout = new(charter);
        Shard shard = new(layout, 1, new ShardOptions());
        RecordBatch batch = new(layout.Records, 4096);
        using RecordFile source = RecordFile.Open(file, charter, layout.Records, new IdHasher(new byte[IdHasher.KeyLength]), RecordKind.Decision);
        long before = 0, from = 0, read = 0;
        bool more = true;
        while (more)
        {
            batch.Clear();
            more = source.Fill(batch);
            shard.Add(batch, 0);
            read += batch.Count;
            if (before == 0 && read > 200_000)
            {
                (before, from) = (GC.GetAllocatedBytesForCurrentThread(), read);
            }
        }

        double each = (GC.GetAllocatedBytesForCurrentThread() - before) / (double)(read - from);
        Console.WriteLine(string.Create(CultureInfo.InvariantCulture, $"allocated {each:0.0} bytes a record after {from:N0} (buckets and remembered ids; decoding alone allocates none)"));
    }

    /// <summary>Bytes allocated where neither a new minute nor a new id comes: what a record itself costs.</summary>
    private static void AllocationsOfKnownMinutes(string file, Charter charter)
    {
        SumLayout layout = new(charter);
        Shard shard = new(layout, 1, new ShardOptions());
        RecordBatch batch = new(layout.Records, 4096);
        using RecordFile source = RecordFile.Open(file, charter, layout.Records, new IdHasher(new byte[IdHasher.KeyLength]), RecordKind.Decision);
        source.Fill(batch);
        shard.Add(batch, 0);
        shard.Add(batch, 0);
        const int rounds = 100;
        long before = GC.GetAllocatedBytesForCurrentThread();
        for (int i = 0; i < rounds; i++)
        {
            shard.Add(batch, 0);
        }

        double each = (GC.GetAllocatedBytesForCurrentThread() - before) / (double)(rounds * batch.Count);
        Console.WriteLine(string.Create(CultureInfo.InvariantCulture, $"allocated {each:0.0} bytes a record where neither a new minute nor a new id comes"));
    }

    public static void Write(string file, int records)
    {
        Random random = new(1);
        using StreamWriter writer = new(file);
        DateTime start = new(2031, 3, 1, 0, 0, 0, DateTimeKind.Utc);
        StringBuilder line = new();
        for (int i = 0; i < records; i++)
        {
            line.Clear().Append(
                CultureInfo.InvariantCulture,
                $$"""{"case":"c{{i:D7}}","decided_at":"{{start.AddSeconds(i * 1.2):yyyy-MM-ddTHH:mm:ss.fffZ}}","decision":"{{(random.Next(2) == 0 ? "fast_track" : "manual_review")}}","language":"{{Languages[random.Next(3)]}}","age":{{random.Next(18, 90)}},"damage":{{random.Next(40000)}},"income":{{random.Next(5000, 90000)}}""");
            for (int f = 0; f < 16; f++)
            {
                line.Append(CultureInfo.InvariantCulture, $",\"f{f}\":\"{(char)('a' + random.Next(3))}\"");
            }

            writer.WriteLine(line.Append('}'));
        }
    }

    public static string CharterText() => string.Join(
        '\n',
        [
            "charter: flood-grants",
            "id: /case",
            "time: /decided_at",
            "decision: { at: /decision, favourable: [fast_track], unfavourable: [manual_review] }",
            "groups:",
            "  - { name: language, at: /language, values: [river, hill, coast], reference: river }",
            "  - { name: age, at: /age, bands: [18, 30, 45, 60, 75] }",
            "intersections: [[language, age]]",
            "inputs:",
            "  - { name: damage, at: /damage, bands: [0, 2000, 5000, 10000, 20000] }",
            "  - { name: income, at: /income, bands: [0, 10000, 20000, 40000] }",
            .. Enumerable.Range(0, 16).Select(f => $"  - {{ name: f{f}, at: /f{f}, values: [a, b, c] }}"),
        ]);
}
