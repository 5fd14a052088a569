namespace Evenhand.Monitoring.Disclosure;

/// <summary>Withholds further counts of a table, so that those that are too small cannot be worked out from the rest.</summary>
/// <remarks>
/// <para>Complementary cell suppression: A. Hundepool et al., "Statistical Disclosure Control" (Wiley 2012), chapter 4. The audit
/// is exact: a count is known to a reader when the sums that the table obeys determine it, also by the rule that parts of nothing are
/// nothing. What is protected against is exact disclosure; a reader may still learn that a count lies in a narrow range.</para>
/// <para>While a sensitive count is determined, the smallest published count that stands in a sum with it is withheld as well.
/// That is greedy and deterministic, not the least possible suppression, which is a hard problem.</para>
/// </remarks>
public static class ComplementarySuppression
{
    /// <summary>Plans which counts to withhold.</summary>
    /// <param name="table">The table.</param>
    /// <returns>The numbers of the counts to withhold, the sensitive ones among them, ascending.</returns>
    public static IReadOnlyCollection<int> Plan(SuppressionTable table)
    {
        ArgumentNullException.ThrowIfNull(table);
        SortedSet<int> withheld = [.. Enumerable.Range(0, table.Count).Where(i => table.IsSensitive(i) && table.ExposureOf(i) == CellExposure.Published)];
        while (withheld.Count > 0)
        {
            bool[] known = Known(table, withheld);
            int[] determined = [.. withheld.Where(i => table.IsSensitive(i) && known[i])];
            List<int> further = [.. determined.Select(i => Complement(table, i, withheld)).Where(i => i >= 0).Distinct()];
            if (further.Count == 0)
            {
                return withheld;
            }

            withheld.UnionWith(further);
        }

        return withheld;
    }

    /// <summary>Which counts a reader of what is published can work out.</summary>
    public static bool[] Known(SuppressionTable table, IReadOnlyCollection<int> withheld)
    {
        ArgumentNullException.ThrowIfNull(table);
        ArgumentNullException.ThrowIfNull(withheld);
        bool[] known = [.. Enumerable.Range(0, table.Count).Select(i => table.ExposureOf(i) != CellExposure.Hidden)];
        foreach (int item in withheld)
        {
            known[item] = false;
        }

        bool isNews = true;
        while (isNews)
        {
            while (FindNothings(table, known))
            {
            }

            isNews = FindDetermined(table, known);
        }

        return known;
    }

    /// <summary>Where the published parts make up the whole published total, the others are nothing; and the parts of nothing are nothing.</summary>
    private static bool FindNothings(SuppressionTable table, bool[] known)
    {
        bool isNews = false;
        foreach ((int total, int[] parts) in table.Sums)
        {
            if (known[total] && parts.Any(p => !known[p])
                && parts.Where(p => known[p]).Sum(table.CountOf) == table.CountOf(total))
            {
                foreach (int part in parts)
                {
                    known[part] = true;
                }

                isNews = true;
            }
        }

        return isNews;
    }

    private static bool FindDetermined(SuppressionTable table, bool[] known)
    {
        int[] unknown = [.. Enumerable.Range(0, known.Length).Where(i => !known[i])];
        Dictionary<int, int> column = unknown.Select((item, i) => (item, i)).ToDictionary(p => p.item, p => p.i);
        LinearSystem system = new(unknown.Length);
        foreach ((int total, int[] parts) in table.Sums)
        {
            Dictionary<int, long> row = [];
            foreach (int part in parts.Where(p => !known[p]))
            {
                row[column[part]] = row.GetValueOrDefault(column[part]) - 1;
            }

            if (!known[total])
            {
                row[column[total]] = row.GetValueOrDefault(column[total]) + 1;
            }

            system.Add(row);
        }

        bool isNews = false;
        foreach (int determined in system.Determined())
        {
            known[unknown[determined]] = true;
            isNews = true;
        }

        return isNews;
    }

    /// <summary>
    /// What to withhold beside a count: the smallest one above nothing in a sum with it; else an empty one, which the reader then
    /// no longer knows to be empty; else anything in a sum with what is withheld already.
    /// </summary>
    private static int Complement(SuppressionTable table, int item, SortedSet<int> withheld)
    {
        int[] beside = Beside(table, i => i == item, withheld);
        int[] further = beside.Length > 0 ? beside : Beside(table, withheld.Contains, withheld);
        return further.DefaultIfEmpty(-1).MinBy(i => i < 0 ? (true, 0L, i) : (table.CountOf(i) == 0, table.CountOf(i), i));
    }

    private static int[] Beside(SuppressionTable table, Func<int, bool> isMeant, SortedSet<int> withheld) =>
    [
        .. table.Sums
            .Where(s => isMeant(s.Total) || s.Parts.Any(isMeant))
            .SelectMany(s => s.Parts.Append(s.Total))
            .Where(i => table.ExposureOf(i) == CellExposure.Published && !withheld.Contains(i))
            .Distinct(),
    ];
}
