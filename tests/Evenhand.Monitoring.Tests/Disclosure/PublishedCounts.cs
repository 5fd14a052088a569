using System.Runtime.CompilerServices;
using System.Text.Json.Nodes;
using Evenhand.Monitoring.Charters;
using Evenhand.Monitoring.Records;
using Evenhand.Monitoring.Tests.Windows;

namespace Evenhand.Monitoring.Tests.Disclosure;

/// <summary>Every count of decided records that one window of a snapshot publishes, as sums over versions, languages and ages.</summary>
internal sealed class PublishedCounts
{
    private const int Languages = 6, Ages = 5;
    private readonly string[] _languages = ["river", "hill", "coast", "(missing)", "(unlisted)", "(declined)"];
    private readonly string[] _ages;
    private readonly List<string> _versions = [];
    private readonly List<(string From, bool[] Atoms, long Count)> _known = [];

    private readonly string _adjust;

    public PublishedCounts(JsonObject document, Charter charter, string window)
    {
        _adjust = charter.Adjust[0].Field;
        document = JsonNode.Parse(document.ToJsonString())!.AsObject();
        _ages = [.. Enumerable.Range(0, Ages).Select(charter.Groups[1].Label)];
        List<JsonObject> readings = [.. document["readings"]!.AsArray().Select(r => r!.AsObject()).Where(r => (string)r["window"]! == window)];
        List<JsonObject> states = [.. document["state"]!["windows"]!.AsArray().Select(w => w!.AsObject()).Where(w => (string)w["window"]! == window)];
        _versions.AddRange(states.Select(w => (string?)w["slice"]).OfType<string>().DefaultIfEmpty(""));
        readings.ForEach(r => Read(r, readings));
        foreach (JsonObject state in states)
        {
            ReadState(state);
        }
    }

    public int Count => _known.Count;

    /// <summary>The small cells of the stream that follow from what is published.</summary>
    public List<string> Attack(IReadOnlyList<SampleRecord> stream, int minimum)
    {
        long[] truth = new long[_versions.Count * Languages * Ages];
        foreach (SampleRecord record in stream.Where(r => r.Decision != DecisionCode.Other))
        {
            int version = _versions is [""] ? 0 : _versions.IndexOf($"version={record.Version}");
            version = version >= 0 ? version : _versions.FindIndex(v => v.Contains("other", StringComparison.Ordinal));
            truth[(((version * Languages) + record.Language) * Ages) + record.Age]++;
        }

        foreach ((string from, bool[] atoms, long count) in _known)
        {
            if (count != Sum(truth, atoms))
            {
                throw new InvalidOperationException($"the attack misreads what is published: {from} is {Sum(truth, atoms)}, not {count}");
            }
        }

        bool[] isNothing = Nothings();
        Span span = new(_known.Select(k => Without(k.Atoms, isNothing)));
        List<string> found = [];
        foreach ((string name, bool[] atoms) in Cells())
        {
            long count = Sum(truth, atoms);
            if (count > 0 && count < minimum && span.Contains(Without(atoms, isNothing)))
            {
                found.Add($"{name} is {count}");
            }
        }

        return found;
    }

    /// <summary>Sums of nothing have no parts; where one sum holds another and is no larger, the rest is nothing.</summary>
    private bool[] Nothings()
    {
        bool[] isNothing = new bool[_versions.Count * Languages * Ages];
        for (int round = 0; round < 3; round++)
        {
            foreach ((_, bool[] large, long count) in _known)
            {
                foreach ((_, bool[] small, long part) in _known.Append(("", new bool[large.Length], 0)))
                {
                    if (part == count && Enumerable.Range(0, large.Length).All(i => large[i] || !small[i] || isNothing[i]))
                    {
                        for (int i = 0; i < large.Length; i++)
                        {
                            isNothing[i] |= large[i] && !small[i];
                        }
                    }
                }
            }
        }

        return isNothing;
    }

    private IEnumerable<(string Name, bool[] Atoms)> Cells()
    {
        foreach (string? slice in _versions.Where(v => v.Length > 0).Prepend(null))
        {
            foreach (string language in _languages.Where(l => l is not ("(missing)" or "(unlisted)")))
            {
                yield return ($"{slice} {language}", Atoms(slice, l => l == language, _ => true));
                foreach (string age in _ages.Where(a => a is not ("(missing)" or "(unlisted)")))
                {
                    yield return ($"{slice} {language}+{age}", Atoms(slice, l => l == language, a => a == age));
                }
            }

            foreach (string age in _ages.Where(a => a is not ("(missing)" or "(unlisted)")))
            {
                yield return ($"{slice} {age}", Atoms(slice, _ => true, a => a == age));
            }
        }
    }

    private void Read(JsonObject reading, List<JsonObject> all)
    {
        string? slice = (string?)reading["slice"], grouping = (string?)reading["grouping"], group = (string?)reading["group"], field = (string?)reading["field"];
        string measure = (string)reading["measure"]!;
        long? count = (long?)reading["count"];
        (Func<string, bool> language, Func<string, bool> age) = Of(grouping, group);
        bool isObserved = (string)reading["basis"]! == "observed";
        if (count is { } n && isObserved && measure is "selection_rate" or "selection_rate_gap" or "impact_ratio" or "odds_ratio")
        {
            Know(slice, language, age, count!.Value);
        }

        if (measure is "missing_rate" or "unlisted_rate" && field is "language" or "age" && count is { } of)
        {
            string label = measure == "missing_rate" ? "(missing)" : "(unlisted)";
            Know(slice, field == "language" ? l => l == label : language, field == "age" ? a => a == label : age, (long)Math.Round(of * ((double?)reading["value"] ?? 0)));
        }

        JsonObject? everyone = all.Find(r => (string?)r["slice"] == slice && r["grouping"] is null && (string)r["measure"]! == "selection_rate");
        if (reading["known_share"] is { } share && everyone?["count"] is { } decided)
        {
            Func<string, bool> listed = label => !label.StartsWith('(');
            Know(slice, grouping!.Split('+').Contains("language") ? listed : _ => true, grouping.Split('+').Contains("age") ? listed : _ => true, (long)Math.Round((double)share * (long)decided));
        }

        JsonObject? rate = all.Find(r => (string?)r["slice"] == slice && (string?)r["grouping"] == grouping && (string?)r["group"] == group && (string)r["measure"]! == "selection_rate" && (string)r["basis"]! == "observed");
        if (measure == "selection_rate" && !isObserved && rate?["count"] is not null)
        {
            ReadBounds(reading, rate, slice, grouping!, group!);
        }

        if (measure == "adjusted_odds_ratio" && count is { } counted && _adjust != "tenure" && grouping != _adjust)
        {
            ReadAdjusted(slice, grouping!, group!, (string)reading["reference"]!, counted);
        }
    }

    /// <summary>An adjusted comparison counts the records of both sides whose strata are listed.</summary>
    private void ReadAdjusted(string? slice, string grouping, string group, string reference, long count)
    {
        (Func<string, bool> language, Func<string, bool> age) = Of(grouping, group);
        (Func<string, bool> language2, Func<string, bool> age2) = Of(grouping, reference);
        Func<string, bool> listed(string field) => label => field != _adjust || !label.StartsWith('(');
        bool[] atoms = [.. Atoms(slice, l => language(l) && listed("language")(l), a => age(a) && listed("age")(a))
            .Zip(Atoms(slice, l => language2(l) && listed("language")(l), a => age2(a) && listed("age")(a)), (x, y) => x || y)];
        _known.Add(($"adjusted {slice} {grouping} {group}", atoms, count));
    }

    /// <summary>Bounds of a rate tell how many records of missing labels may belong to the group.</summary>
    private void ReadBounds(JsonObject bounds, JsonObject rate, string? slice, string grouping, string group)
    {
        long n = (long)rate["count"]!, favourable = (long)rate["favourable"]!, unfavourable = n - favourable;
        double low = (double?)bounds["low"] ?? 0, high = (double?)bounds["high"] ?? 1;
        if (favourable == 0 || unfavourable == 0 || low <= 0 || high >= 1)
        {
            return;
        }

        long misses = (long)Math.Round(favourable / low) - n, hits = (long)Math.Round(unfavourable / (1 - high)) - n;
        (Func<string, bool> language, Func<string, bool> age) = Of(grouping, group);
        Func<string, bool> orMissing(Func<string, bool> of) => label => of(label) || label == "(missing)";
        Know(
            slice,
            grouping.Split('+').Contains("language") ? orMissing(language) : language,
            grouping.Split('+').Contains("age") ? orMissing(age) : age,
            n + misses + hits);
    }

    private void ReadState(JsonObject window)
    {
        string? slice = (string?)window["slice"];
        foreach (JsonObject grouping in window["groupings"]!.AsArray().Select(g => g!.AsObject()))
        {
            string? name = (string?)grouping["grouping"];
            HashSet<string> written = [];
            foreach (JsonObject cell in grouping["cells"]!.AsArray().Select(c => c!.AsObject()))
            {
                string group = string.Join('+', cell["cell"]!.AsArray().Select(l => (string)l!));
                written.Add(group);
                if (cell["withheld"] is null)
                {
                    ReadCell(cell, slice, name, group);
                }
            }

            foreach (string absent in Labels(name).Where(l => !written.Contains(l)))
            {
                (Func<string, bool> language, Func<string, bool> age) = Of(name, absent);
                Know(slice, language, age, 0);
            }
        }
    }

    private void ReadCell(JsonObject cell, string? slice, string? grouping, string group)
    {
        (Func<string, bool> language, Func<string, bool> age) = Of(grouping, group);
        Know(slice, language, age, (long)cell["favourable"]! + (long)cell["unfavourable"]!);
        foreach (string kind in (string[])["missing", "unlisted"])
        {
            JsonObject absences = cell[kind]?.AsObject() ?? [];
            Know(slice, l => language(l) && l == $"({kind})", age, (long?)absences["language"] ?? 0);
            Know(slice, language, a => age(a) && a == $"({kind})", (long?)absences["age"] ?? 0);
        }

        foreach (JsonNode? stratum in _adjust == "tenure" ? [] : cell["strata"] as JsonArray ?? [])
        {
            string label = (_adjust == "age" ? _ages : _languages)[(int)stratum![0]!];
            Know(
                slice,
                l => language(l) && (_adjust != "language" || l == label),
                a => age(a) && (_adjust != "age" || a == label),
                (long)stratum[1]! + (long)stratum[2]!);
        }
    }

    private IEnumerable<string> Labels(string? grouping) => grouping switch
    {
        null => [""],
        "language" => _languages,
        "age" => _ages,
        _ => _languages.SelectMany(l => _ages.Select(a => $"{l}+{a}")),
    };

    private static (Func<string, bool> Language, Func<string, bool> Age) Of(string? grouping, string? group) => grouping switch
    {
        null => (_ => true, _ => true),
        "language" => (l => l == group, _ => true),
        "age" => (_ => true, a => a == group),
        _ => (l => l == group!.Split('+')[0], a => a == group!.Split('+')[1]),
    };

    private void Know(string? slice, Func<string, bool> language, Func<string, bool> age, long count, [CallerLineNumber] int line = 0)
    {
        bool[] atoms = Atoms(slice, language, age);
        if (atoms.Any(a => a) && !_known.Exists(k => k.Atoms.AsSpan().SequenceEqual(atoms)))
        {
            _known.Add(($"{slice} {string.Join('|', _languages.Where(language))} {string.Join('|', _ages.Where(age))} of line {line}", atoms, count));
        }
    }

    private bool[] Atoms(string? slice, Func<string, bool> language, Func<string, bool> age)
    {
        bool[] atoms = new bool[_versions.Count * Languages * Ages];
        for (int i = 0; i < atoms.Length; i++)
        {
            atoms[i] = (slice is null || _versions[i / (Languages * Ages)] == slice) && language(_languages[i / Ages % Languages]) && age(_ages[i % Ages]);
        }

        return atoms;
    }

    private static long Sum(long[] truth, bool[] atoms) => truth.Where((_, i) => atoms[i]).Sum();

    private static bool[] Without(bool[] atoms, bool[] isNothing) => [.. atoms.Select((a, i) => a && !isNothing[i])];

    /// <summary>The span of some sums, by elimination in the integers modulo 2³¹ − 1.</summary>
    private sealed class Span
    {
        private const long Prime = int.MaxValue;
        private readonly List<(int Pivot, long[] Row)> _rows = [];

        public Span(IEnumerable<bool[]> sums)
        {
            foreach (bool[] sum in sums)
            {
                long[] row = Rest(sum);
                int pivot = Array.FindIndex(row, c => c != 0);
                if (pivot >= 0)
                {
                    long inverse = Power(row[pivot], Prime - 2);
                    _rows.Add((pivot, [.. row.Select(c => c * inverse % Prime)]));
                }
            }
        }

        public bool Contains(bool[] sum) => Rest(sum).All(c => c == 0);

        private long[] Rest(bool[] sum)
        {
            long[] row = [.. sum.Select(s => s ? 1L : 0)];
            foreach ((int pivot, long[] other) in _rows)
            {
                long times = row[pivot];
                for (int i = 0; times != 0 && i < row.Length; i++)
                {
                    row[i] = (row[i] + ((Prime - times) * other[i])) % Prime;
                }
            }

            return row;
        }

        private static long Power(long a, long exponent)
        {
            long result = 1;
            for (; exponent > 0; exponent >>= 1, a = a * a % Prime)
            {
                result = (exponent & 1) == 1 ? result * a % Prime : result;
            }

            return result;
        }
    }
}
