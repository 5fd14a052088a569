using System.Globalization;
using System.Text;
using Evenhand.Daemon.Sources;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;

namespace Evenhand.Benchmarks;

/// <summary>Lines of 20 fields read from a file into batches, beside a bare scan of the same file's JSON tokens; one thread.</summary>
internal static class DecodeBenchmark
{
    private const int CodedInputs = 14;
    private const int Rounds = 5;

    private static readonly string[] Languages = ["river", "hill", "coast"];
    private static readonly string[] Tenures = ["owner", "tenant", "other"];

    public static void Run(int records)
    {
        string folder = Directory.CreateTempSubdirectory("evenhand-bench").FullName;
        try
        {
            string file = Path.Combine(folder, "decisions.ndjson");
            Write(file, records);
            Report(file, records);
        }
        finally
        {
            Directory.Delete(folder, recursive: true);
        }
    }

    private static void Report(string file, int records)
    {
        Charter charter = CharterParser.Parse("charter.yaml", Encoding.UTF8.GetBytes(CharterText())).Charter!;
        long tokens = 0, entries = 0, rejected = 0;
        double[] seconds = Median.Seconds(Rounds, () => tokens = TokenScan.Count(file), () => (entries, rejected) = Decode(file, charter));
        if (entries != records || rejected > 0)
        {
            throw new InvalidOperationException($"{entries} entries of {records}, {rejected} of them rejected");
        }

        double length = new FileInfo(file).Length;
        Console.WriteLine(string.Create(CultureInfo.InvariantCulture, $"{records:N0} records, {length / records:0} bytes and {tokens / (double)records:0} tokens each"));
        foreach ((string name, double s) in ((string[])["token scan", "file to batches"]).Zip(seconds))
        {
            Console.WriteLine(string.Create(CultureInfo.InvariantCulture, $"{name,-17} {records / s / 1e3,8:0} k records/s {length / s / 1e6,6:0} MB/s   {seconds[0] / s:0.00} of the scan's rate"));
        }
    }

    private static (long Entries, long Rejected) Decode(string file, Charter charter)
    {
        RecordLayout layout = new(charter);
        RecordBatch batch = new(layout, 4096);
        using RecordFile source = RecordFile.Open(file, charter, layout, new IdHasher(new byte[IdHasher.KeyLength]), RecordKind.Decision);
        long entries = 0, rejected = 0;
        bool more = true;
        while (more)
        {
            batch.Clear();
            more = source.Fill(batch);
            entries += batch.Count;
            rejected += batch.Rejected.AsSpan(0, batch.Count).ContainsAnyExcept(RejectReason.None) ? 1 : 0;
        }

        return (entries, rejected);
    }

    private static void Write(string file, int records)
    {
        Random random = new(1);
        using StreamWriter writer = new(file);
        writer.NewLine = "\n";
        DateTime start = new(2031, 3, 1, 0, 0, 0, DateTimeKind.Utc);
        StringBuilder line = new();
        for (int i = 0; i < records; i++)
        {
            line.Clear().Append(
                CultureInfo.InvariantCulture,
                $$"""{"case":"c{{i:D7}}","decided_at":"{{start.AddSeconds(i * 1.2):yyyy-MM-ddTHH:mm:ss.fffZ}}","decision":"{{(random.Next(2) == 0 ? "fast_track" : "manual_review")}}","score":{{random.NextDouble():0.0000}}""");
            line.Append(
                CultureInfo.InvariantCulture,
                $$""","applicant":{"age":{{random.Next(18, 90)}}},"household":{"language":"{{Languages[random.Next(3)]}}","tenure":"{{Tenures[random.Next(3)]}}","income":{{random.Next(5000, 90000)}}},"survey":{""");
            for (int f = 0; f < CodedInputs - 2; f++)
            {
                line.Append(CultureInfo.InvariantCulture, $"{(f == 0 ? "" : ",")}\"f{f}\":{(f % 3 == 0 ? random.Next(100).ToString(CultureInfo.InvariantCulture) : $"\"{(char)('a' + random.Next(3))}\"")}");
            }

            writer.WriteLine(line.Append("}}"));
        }
    }

    private static string CharterText() => string.Join(
        '\n',
        [
            "charter: flood-grants",
            "id: /case",
            "time: /decided_at",
            "decision: { at: /decision, favourable: [fast_track], unfavourable: [manual_review] }",
            "score: { at: /score, range: [0, 1] }",
            "groups:",
            "  - { name: language, at: /household/language, values: [river, hill, coast], reference: river }",
            "  - { name: age, at: /applicant/age, bands: [18, 30, 45, 60, 75] }",
            "inputs:",
            "  - { name: tenure, at: /household/tenure, values: [owner, tenant, other] }",
            "  - { name: income, at: /household/income, bands: [0, 10000, 20000, 40000] }",
            .. Enumerable.Range(0, CodedInputs - 2).Select(f => $"  - {{ name: f{f}, at: /survey/f{f}, {(f % 3 == 0 ? "bands: [0, 25, 50, 75]" : "values: [a, b, c]")} }}"),
        ]);
}
