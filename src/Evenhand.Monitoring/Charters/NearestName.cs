namespace Evenhand.Monitoring.Charters;

/// <summary>Finds what was probably meant by a misspelt name.</summary>
/// <remarks>
/// Distance: optimal string alignment (insertion, deletion, substitution, transposition of neighbours, each cost 1;
/// no part edited twice). F. J. Damerau, "A technique for computer detection and correction of spelling errors",
/// Communications of the ACM 7(3), 1964, 171–176.
/// </remarks>
internal static class NearestName
{
    // Longer texts are no misspelt names, and the distance is quadratic.
    private const int LongestCompared = 100;

    /// <summary>The candidate at the least distance, the first of several; null where there is none.</summary>
    public static string? Of(string name, IEnumerable<string> candidates)
    {
        string asked = name.Length > LongestCompared ? name[..LongestCompared] : name;
        return candidates.Where(c => c.Length <= LongestCompared).MinBy(c => Distance(asked, c));
    }

    /// <summary>A mend that names the nearest candidate, or the given words where there is none.</summary>
    public static string Suggest(string name, IEnumerable<string> candidates, string otherwise) =>
        Of(name, candidates) is { } near ? $"did you mean {near}?" : otherwise;

    /// <summary>Edits that turn one text into the other, letter case ignored.</summary>
    public static int Distance(string left, string right)
    {
        var d = new int[left.Length + 1, right.Length + 1];
        for (int i = 0; i <= left.Length; i++)
        {
            d[i, 0] = i;
        }

        for (int j = 0; j <= right.Length; j++)
        {
            d[0, j] = j;
        }

        for (int i = 1; i <= left.Length; i++)
        {
            for (int j = 1; j <= right.Length; j++)
            {
                int change = Same(left[i - 1], right[j - 1]) ? 0 : 1;
                d[i, j] = Math.Min(Math.Min(d[i - 1, j] + 1, d[i, j - 1] + 1), d[i - 1, j - 1] + change);
                if (i > 1 && j > 1 && Same(left[i - 1], right[j - 2]) && Same(left[i - 2], right[j - 1]))
                {
                    d[i, j] = Math.Min(d[i, j], d[i - 2, j - 2] + 1);
                }
            }
        }

        return d[left.Length, right.Length];
    }

    private static bool Same(char a, char b) => char.ToLowerInvariant(a) == char.ToLowerInvariant(b);
}
