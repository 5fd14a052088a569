using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Reads where values stand: JSON Pointers (RFC 6901) or column names.</summary>
internal static class PathValue
{
    private const string Mend = "write a JSON Pointer such as /applicant/age, a column name, or a list of them";

    /// <summary>One place or several, or null.</summary>
    public static FieldPath? Read(KeyedNode? node)
    {
        if (node is null)
        {
            return null;
        }

        if (node.Node is not ListNode)
        {
            return Place(node) is { } place ? new FieldPath([place]) : null;
        }

        var places = new List<string>();
        IReadOnlyList<KeyedNode> items = node.List(Mend)!;
        foreach (KeyedNode item in items)
        {
            string? place = Place(item);
            if (place is not null && places.Contains(place, StringComparer.Ordinal))
            {
                item.Report($"{QuotedText.Of(place)} is listed twice", "keep one of the two");
            }
            else if (place is not null)
            {
                places.Add(place);
            }
        }

        if (items.Count == 0)
        {
            node.Report("lists nothing", Mend);
        }

        return places.Count == 0 ? null : new FieldPath(places);
    }

    private static string? Place(KeyedNode node)
    {
        string? place = node.Text(Mend);
        if (place is { Length: 0 })
        {
            node.Report("is empty", Mend);
            return null;
        }

        // RFC 6901, section 3: a tilde is written ~0 and a slash within a name ~1.
        if (place is not null && place[0] == '/' && HasStrayTilde(place))
        {
            node.Report($"{QuotedText.Of(place)} has a tilde that is no ~0 or ~1", "write ~0 for ~ and ~1 for / inside a name");
            return null;
        }

        return place;
    }

    private static bool HasStrayTilde(string place)
    {
        for (int i = place.IndexOf('~'); i >= 0; i = place.IndexOf('~', i + 1))
        {
            if (i + 1 == place.Length || place[i + 1] is not ('0' or '1'))
            {
                return true;
            }
        }

        return false;
    }
}
