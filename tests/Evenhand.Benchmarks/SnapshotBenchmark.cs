using System.Globalization;
using Evenhand.Daemon.Replay;
using Evenhand.Monitoring.Charters;

namespace Evenhand.Benchmarks;

/// <summary>What a replay costs however few its records: opening, tick, snapshot.</summary>
internal static class SnapshotBenchmark
{
    public static void Run(int records)
    {
        string folder = Directory.CreateTempSubdirectory("evenhand-bench").FullName;
        try
        {
            string file = Path.Combine(folder, "decisions.ndjson"), charterFile = Path.Combine(folder, "charter.yaml");
            ReplayBenchmark.Write(file, records);
            File.WriteAllText(charterFile, ReplayBenchmark.CharterText());
            Charter charter = CharterParser.Parse(charterFile, File.ReadAllBytes(charterFile)).Charter!;
            double[] seconds = Median.Seconds(
                41,
                () => new ReplayRun(charter, new ReplayRequest { Charter = charterFile, Inputs = [file] }, TimeProvider.System, null).RunAlone());
            Console.WriteLine(string.Create(CultureInfo.InvariantCulture, $"{records:N0} records to a snapshot: {seconds[0] * 1e3:0} ms"));
        }
        finally
        {
            Directory.Delete(folder, recursive: true);
        }
    }
}
