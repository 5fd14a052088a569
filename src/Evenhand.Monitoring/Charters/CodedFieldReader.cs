using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads what groups and inputs have in common.</summary>
internal static class CodedFieldReader
{
    private static readonly string[] Special = ["(missing)", "(unlisted)", "(declined)"];
    private static readonly string[] Lists = ["values", "missing", "declined"];

    /// <summary>The field's name, or an empty text.</summary>
    public static string Name(MapReader map) =>
        TextValue.Name(map.Require("name", "name the field, such as name: age"), ofField: true) ?? "";

    /// <summary>The field's places, none where they are wrong.</summary>
    public static FieldPath At(MapReader map) =>
        PathValue.Read(map.Require("at", "say where the value stands, such as at: /applicant/age")) ?? new FieldPath([]);

    /// <summary>The special texts of a field, checked against its values.</summary>
    public static (IReadOnlyList<string> Missing, IReadOnlyList<string> Declined) SpecialTexts(
        MapReader map, IReadOnlyList<string>? values)
    {
        IReadOnlyList<string>? missing = TextListValue.Missing(map.Find("missing"));
        IReadOnlyList<string>? declined = TextListValue.Listed(map.Find("declined"), 0, "[not_stated]");
        DisjointLists.Check(map, Lists, [values, missing, declined]);
        return (missing ?? [], declined ?? []);
    }

    /// <summary>Listed values, or null.</summary>
    public static IReadOnlyList<string>? Values(MapReader map, int least)
    {
        IReadOnlyList<string>? values = TextListValue.Listed(map.Find("values"), least, "[owner, tenant, other]");
        CheckCount(map, "values", values?.Count ?? 0);
        foreach (string text in (values ?? []).Intersect(Special))
        {
            map.Report("values", $"{QuotedText.Of(text)} is the program's own name", "name the value otherwise in the records");
        }

        return values;
    }

    /// <summary>Strictly increasing lower cuts, or null.</summary>
    public static IReadOnlyList<double>? Bands(MapReader map)
    {
        const string Mend = "write the lower ends in increasing order, such as [18, 30, 45]";
        KeyedNode? node = map.Find("bands");
        IReadOnlyList<KeyedNode>? items = node?.List(Mend);
        if (items is null)
        {
            return null;
        }

        var cuts = new List<double>(items.Count);
        foreach (KeyedNode item in items)
        {
            if (NumberValue.Read(item, Mend) is not { } cut)
            {
                continue;
            }

            if (cuts.Count > 0 && cut <= cuts[^1])
            {
                item.Report($"{item.Text("")} does not exceed the cut before it", Mend);
            }

            cuts.Add(cut);
        }

        if (items.Count == 0)
        {
            node!.Report("lists nothing", Mend);
        }

        CheckCount(map, "bands", items.Count);
        return cuts.Count == items.Count && cuts.Count > 0 ? cuts : null;
    }

    /// <summary>Reports unless exactly one of the keys is given.</summary>
    public static void ExactlyOne(MapReader map, params string[] keys)
    {
        string list = string.Join(" or ", keys);
        List<string> given = [.. keys.Where(map.Has)];
        if (given.Count == 0)
        {
            map.ReportWhole($"has neither {string.Join(" nor ", keys)}", $"add {list}");
        }
        else if (given.Count > 1)
        {
            map.ReportWhole($"has {string.Join(" and ", given)}", $"keep one of {list}");
        }
    }

    private static void CheckCount(MapReader map, string key, int count)
    {
        if (count > CharterLimits.ValuesPerField)
        {
            map.Report(
                key,
                FormattableString.Invariant($"lists {count} entries"),
                FormattableString.Invariant($"keep at most {CharterLimits.ValuesPerField:N0}"));
        }
    }
}
