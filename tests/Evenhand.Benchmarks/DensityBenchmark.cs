using System.Diagnostics;
using System.Globalization;
using Evenhand.Circuits.Learning;
using Evenhand.Circuits.Structure;

namespace Evenhand.Benchmarks;

/// <summary>How likely learned circuits find the test records of the DNA density benchmark: rows 1–1600, 1601–2000 and 2001–3186 of the splice-junction data.</summary>
internal static class DensityBenchmark
{
    public static void Run(int profiles)
    {
        string[][] rows = [.. File.ReadLines(Path.Combine(DataFolder(), "dna_splice.csv")).Skip(1).Select(l => l.Split(','))];
        Variable[] fields = [.. Enumerable.Range(1, 180).Select(i => Variable.Category($"V{i}", ["0", "1"]))];
        ushort[][] columns = [.. fields.Select((_, f) => rows.Select(r => ushort.Parse(r[f + 1], CultureInfo.InvariantCulture)).ToArray())];
        TrainingTable all = new([], null, fields, [], [], columns);
        TrainingTable part(int from, int to) => all.Rows([.. Enumerable.Range(from, to - from)]);
        TrainingTable train = part(0, 1600), valid = part(1600, 2000), test = part(2000, 3186);
        for (int seed = 1; seed <= 3; seed++)
        {
            long start = Stopwatch.GetTimestamp();
            LearnedProfile learned = new ProfileLearner(train, valid, new LearningOptions { Profiles = profiles, Seed = seed }).Learn();
            double seconds = Stopwatch.GetElapsedTime(start).TotalSeconds;
            Console.WriteLine(string.Create(
                CultureInfo.InvariantCulture,
                $"seed {seed}: valid {learned.HeldOut:0.000}, test {ProfileLearner.MeanLogLikelihood(learned.Circuit, test):0.000} nats a record, {learned.Circuit.Shape.Inner.Count} inner fields, {seconds:0.0} s"));
        }
    }

    private static string DataFolder()
    {
        string? folder = AppContext.BaseDirectory;
        while (folder is not null && !File.Exists(Path.Combine(folder, "Monitor.sln")))
        {
            folder = Path.GetDirectoryName(folder);
        }

        return Path.Combine(folder!, "tests", "data");
    }
}
