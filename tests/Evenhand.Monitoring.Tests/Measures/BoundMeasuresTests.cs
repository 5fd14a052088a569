using CsCheck;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Measures;
using Evenhand.Monitoring.Records;
using Evenhand.Monitoring.Tests.Windows;
using Evenhand.Monitoring.Windows;
using Xunit;

namespace Evenhand.Monitoring.Tests.Measures;

/// <summary>Bounds against an enumeration of every assignment of the missing labels.</summary>
public sealed class BoundMeasuresTests
{
    private static readonly Charter Charter = SampleStream.Charter() with
    {
        Groups =
        [
            new GroupField { Name = "language", At = new FieldPath(["/l"]), Values = ["river", "hill"], Reference = 0 },
            new GroupField { Name = "age", At = new FieldPath(["/a"]), Values = ["young", "old"], Reference = 0 },
        ],
    };

    private static readonly Gen<SampleRecord> Record = Gen.Select(Gen.Int[0, 3], Gen.Int[0, 3], Gen.Bool).Select(
        (language, age, favourable) => new SampleRecord(SampleStream.Start, 0, language, age, 0, favourable ? DecisionCode.Favourable : DecisionCode.Unfavourable));

    [Theory]
    [InlineData("language")]
    [InlineData("language+age")]
    public void Bounds_SmallStreams_AreTheExtremesOfAllAssignments(string grouping) => Record.Array[1, 7].Sample(
        records =>
        {
            IReadOnlyList<Reading> readings = Measure(records);
            foreach (Reading reading in readings.Where(r => r.Basis == BasisNames.Bounds && r.Grouping == grouping))
            {
                (double low, double high) = Enumerate(records, grouping, reading);
                if (double.IsFinite(low) && double.IsFinite(high))
                {
                    Assert.Equal(low, reading.Low!.Value, 12);
                    Assert.Equal(high, reading.High!.Value, 12);
                }
            }
        },
        iter: 300);

    private static IReadOnlyList<Reading> Measure(SampleRecord[] records)
    {
        Shard shard = SampleStream.NewShard(Charter);
        SampleStream.Feed(shard, Charter, records.Select((r, i) => r with { Id = i }));
        SumLayout layout = new(Charter);
        long[] values = new long[layout.Length];
        shard.AddWindow(WindowSpan.All(0, long.MaxValue), 0, values);
        return MeasureEngine.Measure(new WindowSums(layout, "all", null, values));
    }

    private static (double Low, double High) Enumerate(SampleRecord[] records, string grouping, Reading reading)
    {
        double low = double.PositiveInfinity, high = double.NegativeInfinity;
        foreach (List<(string Group, bool Favourable)> world in Worlds(records, grouping))
        {
            double value = Value(world, reading);
            low = Math.Min(low, value);
            high = Math.Max(high, value);
            if (double.IsNaN(value))
            {
                return (double.NaN, double.NaN);
            }
        }

        return (low, high);
    }

    /// <summary>Every completion of the missing labels (code 2) to listed ones; records with unlisted labels (code 3) belong to no group.</summary>
    private static IEnumerable<List<(string Group, bool Favourable)>> Worlds(SampleRecord[] records, string grouping)
    {
        List<List<(string, bool)>> worlds = [[]];
        foreach (SampleRecord record in records)
        {
            string[] languages = Options(record.Language, ["river", "hill"]);
            string[] ages = grouping.Contains('+', StringComparison.Ordinal) ? Options(record.Age, ["young", "old"]) : [""];
            string[] groups = [.. languages.SelectMany(l => ages.Select(a => a.Length == 0 ? l : $"{l}+{a}"))];
            if (groups.Length > 0)
            {
                bool favourable = record.Decision == DecisionCode.Favourable;
                worlds = [.. worlds.SelectMany(w => groups.Select(g => (List<(string, bool)>)[.. w, (g, favourable)]))];
            }
        }

        return worlds;

        static string[] Options(int code, string[] names) => code switch { < 2 => [names[code]], 2 => names, _ => [] };
    }

    private static double Value(List<(string Group, bool Favourable)> world, Reading reading)
    {
        double own = Rate(world, reading.Group!), reference = reading.Reference is null ? 0 : Rate(world, reading.Reference);
        return reading.Measure switch
        {
            MeasureNames.SelectionRate => own,
            MeasureNames.SelectionRateGap => own - reference,
            MeasureNames.ImpactRatio => own / reference,
            _ => (1 - own) / (1 - reference),
        };
    }

    private static double Rate(List<(string Group, bool Favourable)> world, string group)
    {
        List<bool> decisions = [.. world.Where(r => r.Group == group).Select(r => r.Favourable)];
        return decisions.Count == 0 ? double.NaN : decisions.Average(d => d ? 1.0 : 0.0);
    }
}
