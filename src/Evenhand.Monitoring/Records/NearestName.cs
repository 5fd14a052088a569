namespace Evenhand.Monitoring.Records;

/// <summary>The name that someone may have meant.</summary>
internal static class NearestName
{
    /// <summary>The name nearest to any of the places by edit distance, if it is near.</summary>
    /// <returns>Null where all names differ by more than a third of their letters.</returns>
    public static string? Of(IReadOnlyList<string> places, IReadOnlyList<string> names)
    {
        string? nearest = null;
        int least = int.MaxValue;
        foreach (string place in places.Select(place => place.TrimStart('/')))
        {
            foreach (string name in names)
            {
                int distance = Distance(place.ToUpperInvariant(), name.ToUpperInvariant());
                if (distance < least && distance <= Math.Max(1, Math.Max(place.Length, name.Length) / 3))
                {
                    (nearest, least) = (name, distance);
                }
            }
        }

        return nearest;
    }

    /// <summary>Insertions, deletions and substitutions between two texts (V. I. Levenshtein, 1966).</summary>
    private static int Distance(string a, string b)
    {
        int[] row = [.. Enumerable.Range(0, b.Length + 1)];
        for (int i = 1; i <= a.Length; i++)
        {
            int diagonal = row[0];
            row[0] = i;
            for (int j = 1; j <= b.Length; j++)
            {
                int substituted = diagonal + (a[i - 1] == b[j - 1] ? 0 : 1);
                diagonal = row[j];
                row[j] = Math.Min(substituted, Math.Min(row[j], row[j - 1]) + 1);
            }
        }

        return row[b.Length];
    }
}
