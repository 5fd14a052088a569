namespace Evenhand.Monitoring.Charters;

/// <summary>Finds groups by the texts that people write for them.</summary>
internal static class GroupLabels
{
    /// <summary>The texts of the listed codes of a field; none where it has neither values nor bands.</summary>
    public static List<string> ListedLabels(this CodedField field) =>
        field.Values is null && field.Bands is null ? [] : [.. Enumerable.Range(0, field.ListedCount).Select(field.Label)];

    /// <summary>The codes of a group written <c>a+b</c>, one for each field in order, or null if there is no such group.</summary>
    /// <remarks>Values may hold a plus sign themselves, so every way of cutting the text is tried.</remarks>
    public static int[]? Find(string text, IReadOnlyList<GroupField> fields)
    {
        var codes = new int[fields.Count];
        return Match(text, fields, 0, codes) ? codes : null;
    }

    private static bool Match(string rest, IReadOnlyList<GroupField> fields, int index, int[] codes)
    {
        bool isLast = index == fields.Count - 1;
        for (int code = 0; code < fields[index].ListedCount; code++)
        {
            string label = fields[index].Label(code);
            codes[index] = code;
            if (isLast ? rest == label : rest.StartsWith(label + "+", StringComparison.Ordinal)
                && Match(rest[(label.Length + 1)..], fields, index + 1, codes))
            {
                return true;
            }
        }

        return false;
    }
}
