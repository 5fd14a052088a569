using System.Text.Json.Nodes;
using CsCheck;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Disclosure;
using Evenhand.Monitoring.Tests.Snapshots;
using Evenhand.Monitoring.Tests.Windows;
using Evenhand.Monitoring.Windows;
using Xunit;

namespace Evenhand.Monitoring.Tests.Disclosure;

public sealed class ComplementarySuppressionTests
{
    private const int Minimum = 3;

    /// <summary>2 × 3 tables with margins: every non-negative table that agrees with what is published is enumerated.</summary>
    [Fact]
    public void Plan_SmallTables_LeaveEverySensitiveCellAtLeastTwoValues() => Gen.Int[0, 6].Array[6].Sample(
        counts =>
        {
            (SuppressionTable table, int[] cells) = TableOf(counts);
            int[] withheld = [.. ComplementarySuppression.Plan(table)];
            foreach (int sensitive in withheld.Where(i => i < 6 && counts[i] is > 0 and < Minimum))
            {
                HashSet<long> possible = [.. Completions(counts, withheld).Select(c => (long)c[sensitive])];
                HashSet<long> unavoidable = [.. Completions(counts, [0, 1, 2, 3, 4, 5, 7, 8, 9, 10, 11]).Select(c => (long)c[sensitive])];
                Assert.True(possible.Count > 1 || unavoidable.Count == 1, $"cell {sensitive} of {string.Join(',', counts)} withheld {string.Join(',', withheld)}");
            }

            Assert.Equal(12, table.Count);
            Assert.Equal(6, cells.Length);
        },
        iter: 400);

    [Theory]
    [InlineData(150)]
    [InlineData(600)]
    public void Snapshot_PublishedCounts_NeverGiveASmallCellAway(int records)
    {
        Charter charter = SampleSnapshot.Charter(10);
        List<SampleRecord> stream = SampleStream.Random(21, records, 9 * EventTime.Day);
        JsonObject document = SampleSnapshot.Build(charter, stream);
        List<JsonObject> readings = [.. document["readings"]!.AsArray().Select(r => r!.AsObject())];

        Assert.DoesNotContain(readings, r => r["count"] is { } count && (long)count < 10);
        Assert.Contains(readings, r => r["suppressed"] is not null);

        // A plain attack: one group of a single grouping withheld, all its siblings and the total known.
        foreach (IGrouping<(string, string?, string), JsonObject> table in readings
            .Where(r => (string?)r["measure"] == "selection_rate" && (string?)r["basis"] == "observed" && r["grouping"] is { } g && !((string)g!).Contains('+', StringComparison.Ordinal))
            .GroupBy(r => ((string)r["window"]!, (string?)r["slice"], (string)r["grouping"]!)))
        {
            JsonObject[] hidden = [.. table.Where(r => r["suppressed"] is not null && r["cell"] is not null)];
            if (hidden.Length == 1 && table.Key.Item2 is null && table.Key.Item1 == "all")
            {
                string group = (string)hidden[0]["group"]!;
                int language = Array.IndexOf(["river", "hill", "coast"], group);
                Assert.DoesNotContain(stream.Count(r => r.Language == language && r.Decision != Evenhand.Monitoring.Records.DecisionCode.Other), Enumerable.Range(1, 9));
            }
        }
    }

    private static (SuppressionTable Table, int[] Cells) TableOf(int[] counts)
    {
        SuppressionTable table = new();
        int[] cells = [.. counts.Select(c => table.Add(c, CellExposure.Published, c is > 0 and < Minimum))];
        int total = table.Add(counts.Sum(), CellExposure.Required, false);
        int[] rows = [.. Enumerable.Range(0, 2).Select(r => Add(Enumerable.Range(0, 3).Select(c => (3 * r) + c)))];
        int[] columns = [.. Enumerable.Range(0, 3).Select(c => Add([c, c + 3]))];
        table.AddSum(total, rows);
        table.AddSum(total, columns);
        return (table, cells);

        int Add(IEnumerable<int> parts)
        {
            int[] of = [.. parts];
            int sum = of.Sum(i => counts[i]);
            int item = table.Add(sum, CellExposure.Published, sum is > 0 and < Minimum);
            table.AddSum(item, of);
            return item;
        }
    }

    /// <summary>The tables whose total is known and whose cells and margins agree with the counts that are not withheld.</summary>
    private static IEnumerable<int[]> Completions(int[] counts, int[] withheld)
    {
        int total = counts.Sum();
        int[] cell = new int[6];
        return Fill(0, total);

        IEnumerable<int[]> Fill(int at, int left)
        {
            if (at == 5)
            {
                cell[5] = left;
                if (Agrees())
                {
                    yield return [.. cell];
                }

                yield break;
            }

            int from = withheld.Contains(at) ? 0 : counts[at], to = withheld.Contains(at) ? left : Math.Min(left, counts[at]);
            for (int value = from; value <= to; value++)
            {
                cell[at] = value;
                foreach (int[] table in Fill(at + 1, left - value))
                {
                    yield return table;
                }
            }
        }

        bool Agrees()
        {
            bool isLast = withheld.Contains(5) || cell[5] == counts[5];
            bool areRows = Enumerable.Range(0, 2).All(r => withheld.Contains(7 + r) || Row(cell, r) == Row(counts, r));
            bool areColumns = Enumerable.Range(0, 3).All(c => withheld.Contains(9 + c) || cell[c] + cell[c + 3] == counts[c] + counts[c + 3]);
            return isLast && areRows && areColumns;
        }

        static int Row(int[] table, int row) => table[3 * row] + table[(3 * row) + 1] + table[(3 * row) + 2];
    }
}
