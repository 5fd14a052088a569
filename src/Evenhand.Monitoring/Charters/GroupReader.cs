using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads the fields by which people are grouped.</summary>
internal static class GroupReader
{
    private const string Example = "{ name: language, at: /household/language, values: [river, hill, coast] }";

    // Tolerance for the sum of a prior that people type by hand.
    private const double PriorSumTolerance = 1e-6;

    /// <summary>The groups; null if the key holds no list.</summary>
    public static List<Drafted<GroupField>>? Read(KeyedNode? node) =>
        node is null ? [] : DraftedList.Read(node, CharterShapes.Group, CharterLimits.Fields, Example, One);

    private static GroupField One(MapReader map)
    {
        CodedFieldReader.ExactlyOne(map, "values", "bands");
        IReadOnlyList<string>? values = CodedFieldReader.Values(map, least: 2);
        (IReadOnlyList<string> missing, IReadOnlyList<string> declined) = CodedFieldReader.SpecialTexts(map, values);
        var field = new GroupField
        {
            Name = CodedFieldReader.Name(map),
            At = CodedFieldReader.At(map),
            Values = values,
            Bands = CodedFieldReader.Bands(map),
            Missing = missing,
            Declined = declined,
        };

        // Empty where the values or bands are themselves wrong: nothing is then checked against them.
        List<string> labels = field.ListedLabels();
        return field with
        {
            Reference = Reference(map.Find("reference"), labels),
            Probabilities = Probabilities(map.Find("probabilities"), labels),
            Prior = Prior(map, labels),
        };
    }

    private static int? Reference(KeyedNode? node, List<string> labels)
    {
        string? text = TextValue.Read(node, "name one of the listed groups");
        if (text is null || labels.Count == 0)
        {
            return null;
        }

        int code = labels.IndexOf(text);
        if (code < 0)
        {
            node!.Report($"{QuotedText.Of(text)} is none of the groups", NearestName.Suggest(text, labels, "name one of them"));
        }

        return code < 0 ? null : code;
    }

    private static Dictionary<string, FieldPath>? Probabilities(KeyedNode? node, List<string> labels)
    {
        MapReader? map = node?.Map(CharterShapes.Free, "write a mapping from groups to places, such as { river: /p/river, hill: /p/hill }");
        if (map is null)
        {
            return null;
        }

        var places = new Dictionary<string, FieldPath>(StringComparer.Ordinal);
        foreach (string group in map.FreeKeys)
        {
            CheckListed(map, group, labels);
            if (PathValue.Read(map.Find(group)) is { } place)
            {
                places.Add(group, place);
            }
        }

        if (map.FreeKeys.Count == 0)
        {
            node!.Report("names no group", "add a place for each group, or remove the key");
        }

        return places;
    }

    private static Dictionary<string, double>? Prior(MapReader group, List<string> labels)
    {
        KeyedNode? node = group.Find("prior");
        MapReader? map = node?.Map(CharterShapes.Free, "write a mapping from groups to shares, such as { river: 0.6, hill: 0.4 }");
        if (map is null)
        {
            return null;
        }

        var shares = new Dictionary<string, double>(StringComparer.Ordinal);
        foreach (string name in map.FreeKeys)
        {
            CheckListed(map, name, labels);
            if (NumberValue.Read(map.Find(name), v => v is > 0 and <= 1, "in (0, 1]", "write a share above 0 and at most 1") is { } share)
            {
                shares.Add(name, share);
            }
        }

        CheckPrior(group, map, shares);
        return shares;
    }

    private static void CheckPrior(MapReader group, MapReader map, Dictionary<string, double> shares)
    {
        double sum = shares.Values.Sum();
        if (!group.Has("probabilities"))
        {
            group.Report("prior", "is given without probabilities", "add probabilities, or remove prior");
        }
        else if (group.Find("probabilities")!.Node is MapNode places
            && !places.Pairs.Select(p => p.Key.Text).ToHashSet().SetEquals(map.FreeKeys))
        {
            group.Report("prior", "does not name the same groups as probabilities", "give a share for each of them and no other");
        }

        if (shares.Count == map.FreeKeys.Count && Math.Abs(sum - 1) > PriorSumTolerance)
        {
            group.Report("prior", FormattableString.Invariant($"adds up to {sum:G6}"), "make the shares add up to 1");
        }
    }

    private static void CheckListed(MapReader map, string group, List<string> labels)
    {
        if (labels.Count > 0 && !labels.Contains(group))
        {
            map.Report(group, "is none of the groups", NearestName.Suggest(group, labels, "name one of them"));
        }
    }
}
