using System.Numerics;
using System.Text.Json.Nodes;
using Evenhand.Monitoring.Disclosure;
using Evenhand.Monitoring.Measures;
using Evenhand.Monitoring.Records;
using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Snapshots;

/// <summary>The sums of a snapshot's windows as <c>evenhand-state/1</c>, without those that stand for too few records.</summary>
/// <remarks>The format is described in <c>snapshot-format.md</c>; <see cref="StateReader"/> reads it back.</remarks>
/// <param name="withheld">What must not leave the store.</param>
public sealed class StateWriter(WithheldCells withheld)
{
    /// <summary>The format's name and version.</summary>
    public const string Format = "evenhand-state/1";

    private readonly HashSet<string> _incomplete = [];
    private string _window = "";

    /// <summary>The windows of which something was left out, baselines under their own names.</summary>
    public IReadOnlySet<string> Incomplete => _incomplete;

    /// <summary>The state of some windows.</summary>
    public JsonObject Write(IEnumerable<WindowSums> windows) => new()
    {
        ["format"] = Format,
        ["windows"] = new JsonArray([.. windows.Select(Window)]),
    };

    private JsonObject Window(WindowSums sums)
    {
        _window = sums.Window;
        JsonObject window = new() { ["window"] = sums.Window };
        if (sums.Slice is not null)
        {
            window["slice"] = sums.Slice;
        }

        window["groupings"] = new JsonArray([.. sums.Layout.Groupings.Select(shape => Grouping(sums, shape))]);
        return window;
    }

    private JsonObject Grouping(WindowSums sums, GroupingShape shape)
    {
        JsonArray cells = [];
        for (int cell = 0; cell < shape.Cells; cell++)
        {
            if (Cell(sums, shape, cell) is { } written)
            {
                cells.Add(written);
            }
        }

        JsonObject grouping = new() { ["cells"] = cells };
        if (shape.Name is not null)
        {
            grouping["grouping"] = shape.Name;

            // Which group has the highest rate cannot be told from what is left when that group is withheld.
            GroupingView view = new(sums, shape);
            if (!view.IsReferenceNamed && view.Reference is { } reference)
            {
                grouping["reference"] = new JsonArray([.. shape.Labels(reference.Index).Select(l => (JsonNode)l)]);
            }

            if (withheld.Contains(sums.Window, sums.Slice, shape.Name, WithheldCells.WholeGrouping, WithheldPart.KnownShare))
            {
                grouping["known_share"] = LeaveOut();
            }
        }

        return grouping;
    }

    private JsonObject? Cell(WindowSums sums, GroupingShape shape, int cell)
    {
        CellCounts counts = sums.Counts(shape, cell);
        long records = counts.Decided + counts.Other;
        bool isPlanned = withheld.Contains(sums.Window, sums.Slice, shape.Name, cell);
        if (records == 0 && !isPlanned)
        {
            return null;
        }

        JsonObject written = new() { ["cell"] = new JsonArray([.. shape.Labels(cell).Select(l => (JsonNode)l)]) };
        if (isPlanned || records < withheld.Minimum)
        {
            written["withheld"] = LeaveOut(true);
            return written;
        }

        written["favourable"] = CanonicalJson.Integer(counts.Favourable);
        written["unfavourable"] = CanonicalJson.Integer(counts.Unfavourable);
        written["other"] = CanonicalJson.Integer(counts.Other);
        AddOutcomes(written, sums, shape, cell);
        AddAbsences(written, sums, shape, cell);
        AddStrata(written, sums, shape, cell);
        return written;
    }

    /// <summary>Outcomes and scores by outcome, unless one of the shares that rest on them would stand for too few records.</summary>
    private void AddOutcomes(JsonObject written, WindowSums sums, GroupingShape shape, int cell)
    {
        CellCounts c = sums.Counts(shape, cell);
        bool isKnown = !withheld.Contains(sums.Window, sums.Slice, shape.Name, cell, WithheldPart.Outcomes);
        bool isSplit = isKnown && IsEnough(c.Positive) && IsEnough(c.Negative) && IsEnough(c.FavourablePositive + c.FavourableNegative);
        if (sums.Layout.Charter.Outcome is not null)
        {
            written["outcomes"] = isSplit
                ? Numbers(c.Positive - c.FavourablePositive, c.Negative - c.FavourableNegative, c.FavourablePositive, c.FavourableNegative)
                : LeaveOut();
        }

        if (shape.ScoresAt < 0)
        {
            return;
        }

        (long Count, BigInteger Sum, BigInteger Squares)[] scores =
            [.. Enum.GetValues<OutcomeCode>().Select(o => sums.Scores(shape, cell, o))];
        if (!isSplit || scores.Any(s => !IsEnough(s.Count)))
        {
            LeaveOut();
            scores = [scores.Aggregate((a, b) => (a.Count + b.Count, a.Sum + b.Sum, a.Squares + b.Squares))];
        }

        bool isScored = !withheld.Contains(sums.Window, sums.Slice, shape.Name, cell, WithheldPart.Scores);
        written["scores"] = !isScored || (scores.Length == 1 && !IsEnough(scores[0].Count))
            ? LeaveOut()
            : new JsonArray([.. scores.Select(s => (JsonNode)new JsonArray(CanonicalJson.Integer(s.Count), s.Sum.ToString(), s.Squares.ToString()))]);
    }

    private static void AddAbsences(JsonObject written, WindowSums sums, GroupingShape shape, int cell)
    {
        foreach ((string key, int kind) in (ReadOnlySpan<(string, int)>)[("missing", 0), ("unlisted", 1)])
        {
            JsonObject absences = [];
            for (int f = 0; f < sums.Layout.AbsenceFields.Count; f++)
            {
                long count = sums.Absent(shape, cell, f, kind);
                if (count > 0)
                {
                    absences[sums.Layout.AbsenceFields[f]] = CanonicalJson.Integer(count);
                }
            }

            if (absences.Count > 0)
            {
                written[key] = absences;
            }
        }
    }

    /// <summary>The strata of a cell, or null where one of them would stand for too few records or would give another cell away.</summary>
    private void AddStrata(JsonObject written, WindowSums sums, GroupingShape shape, int cell)
    {
        if (shape.StrataAt < 0)
        {
            return;
        }

        if (withheld.Contains(sums.Window, sums.Slice, shape.Name, cell, WithheldPart.Strata))
        {
            written["strata"] = LeaveOut();
            return;
        }

        JsonArray strata = [];
        for (int s = 0; s < sums.Layout.Strata; s++)
        {
            long unfavourable = sums.InStratum(shape, cell, s, 0), favourable = sums.InStratum(shape, cell, s, 1);
            if (unfavourable + favourable > 0)
            {
                strata.Add(Numbers(s, favourable, unfavourable));
            }
        }

        written["strata"] = strata;
    }

    private JsonNode? LeaveOut(bool? mark = null)
    {
        _incomplete.Add(_window);
        return mark;
    }

    private bool IsEnough(long count) => count == 0 || count >= withheld.Minimum;

    private static JsonArray Numbers(params ReadOnlySpan<long> numbers)
    {
        JsonArray array = [];
        foreach (long number in numbers)
        {
            array.Add(CanonicalJson.Integer(number));
        }

        return array;
    }
}
