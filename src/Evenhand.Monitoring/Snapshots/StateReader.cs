using System.Globalization;
using System.Numerics;
using System.Text.Json.Nodes;
using Evenhand.Monitoring.Disclosure;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>Reads the sums back that a <see cref="StateWriter"/> wrote; withheld ones are zero and known as withheld.</summary>
/// <param name="layout">The charter's sums.</param>
public sealed class StateReader(SumLayout layout)
{
    // Labels may hold any printable character.
    private const char Separator = '\u001f';

    /// <summary>What the state withholds.</summary>
    public WithheldCells Withheld { get; } = new(layout.Charter.MinimumCell);

    /// <summary>The windows of a state.</summary>
    /// <exception cref="FormatException">Not a state of this charter.</exception>
    public IReadOnlyList<WindowSums> Read(JsonObject state)
    {
        ArgumentNullException.ThrowIfNull(state);
        if ((string?)state["format"] != StateWriter.Format)
        {
            throw new FormatException($"the state's format is {state["format"]}, not {StateWriter.Format}");
        }

        try
        {
            return [.. state["windows"]!.AsArray().Select(w => Window(w!.AsObject()))];
        }
        catch (Exception e) when (e is NullReferenceException or InvalidOperationException or KeyNotFoundException or OverflowException or ArgumentException or IndexOutOfRangeException)
        {
            throw new FormatException("the state is not laid out as this snapshot's charter asks", e);
        }
    }

    private WindowSums Window(JsonObject window)
    {
        WindowSums sums = new(layout, (string)window["window"]!, (string?)window["slice"], new long[layout.Length]);
        foreach (JsonNode? grouping in window["groupings"]!.AsArray())
        {
            string? name = (string?)grouping!["grouping"];
            GroupingShape shape = layout.Groupings.First(g => g.Name == name);
            Dictionary<string, int> cells = Enumerable.Range(0, shape.Cells).ToDictionary(c => string.Join(Separator, shape.Labels(c)));
            foreach (JsonNode? cell in grouping["cells"]!.AsArray())
            {
                Cell(sums, shape, cells[LabelOf(cell!["cell"]!)], cell.AsObject());
            }

            if (grouping.AsObject().ContainsKey("known_share"))
            {
                Withheld.Add(sums.Window, sums.Slice, name, WithheldCells.WholeGrouping, WithheldPart.KnownShare);
            }

            if (grouping["reference"] is { } reference)
            {
                sums.StatedReferences[name!] = cells[LabelOf(reference)];
            }
        }

        return sums;
    }

    private static string LabelOf(JsonNode labels) => string.Join(Separator, labels.AsArray().Select(l => (string)l!));

    private void Cell(WindowSums sums, GroupingShape shape, int cell, JsonObject written)
    {
        if (written["withheld"] is not null)
        {
            Withheld.Add(sums.Window, sums.Slice, shape.Name, cell);
            return;
        }

        ReadDecisions(sums, shape, cell, written);
        ReadScores(sums, shape, cell, written["scores"]?.AsArray());
        ReadAbsences(sums, shape, cell, written["missing"]?.AsObject(), 0);
        ReadAbsences(sums, shape, cell, written["unlisted"]?.AsObject(), 1);
        foreach (JsonNode? stratum in written["strata"]?.AsArray() ?? [])
        {
            int at = shape.StrataAt + (((cell * layout.Strata) + (int)Number(stratum![0])) * 2);
            sums.Values[at + 1] = Number(stratum[1]);
            sums.Values[at] = Number(stratum[2]);
        }
    }

    private static void ReadDecisions(WindowSums sums, GroupingShape shape, int cell, JsonObject written)
    {
        Span<long> counts = sums.Values.AsSpan(shape.CountsAt + (cell * SumLayout.CountWidth), SumLayout.CountWidth);
        JsonArray? outcomes = written["outcomes"]?.AsArray();
        for (int i = 0; outcomes is not null && i < 2; i++)
        {
            counts[1 + i] = Number(outcomes[i]);
            counts[4 + i] = Number(outcomes[2 + i]);
        }

        counts[0] = Number(written["unfavourable"]) - counts[1] - counts[2];
        counts[3] = Number(written["favourable"]) - counts[4] - counts[5];
        counts[6] = Number(written["other"]);
    }

    private static void ReadScores(WindowSums sums, GroupingShape shape, int cell, JsonArray? scores)
    {
        for (int outcome = 0; outcome < (scores?.Count ?? 0); outcome++)
        {
            int at = shape.ScoresAt + (cell * SumLayout.ScoreWidth) + (outcome * 5);
            sums.Values[at] = Number(scores![outcome]![0]);
            Split((string)scores[outcome]![1]!, sums.Values.AsSpan(at + 1, 2));
            Split((string)scores[outcome]![2]!, sums.Values.AsSpan(at + 3, 2));
        }
    }

    private void ReadAbsences(WindowSums sums, GroupingShape shape, int cell, JsonObject? absences, int kind)
    {
        foreach ((string field, JsonNode? count) in absences ?? [])
        {
            int f = layout.AbsenceFields.ToList().IndexOf(field);
            sums.Values[shape.AbsencesAt + (((cell * layout.AbsenceFields.Count) + f) * 2) + kind] = Number(count);
        }
    }

    private static void Split(string text, Span<long> parts)
    {
        BigInteger whole = BigInteger.Parse(text, CultureInfo.InvariantCulture);
        parts[0] = (long)(whole & 0xFFFFF);
        parts[1] = (long)(whole >> 20);
    }

    /// <summary>An integer, which stands as a string where it is beyond 2⁵³; null, which is withheld, reads as 0.</summary>
    private static long Number(JsonNode? node) => node is null
        ? 0
        : node.GetValueKind() == System.Text.Json.JsonValueKind.String
            ? long.Parse((string)node!, CultureInfo.InvariantCulture)
            : node.GetValue<long>();
}
