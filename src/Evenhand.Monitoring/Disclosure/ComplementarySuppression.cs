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
    public static IReadOnlySet<int> Plan(SuppressionTable table) => Plan([table], new HashSet<int>());

    /// <summary>Plans which counts to withhold, the same ones in each of some tables.</summary>
    /// <remarks>
    /// Where tables of one shape add up to another of that shape, such as slices, one pattern for all is safe without looking at the
    /// sums between them: whatever change of the withheld counts agrees with the margins of one table can be carried into the total.
    /// </remarks>
    /// <param name="tables">Tables of one shape: the same numbers, exposures and sums; counts and what is sensitive may differ.</param>
    /// <param name="already">Counts that are withheld in any case.</param>
    public static IReadOnlySet<int> Plan(IReadOnlyList<SuppressionTable> tables, IReadOnlySet<int> already)
    {
        ArgumentNullException.ThrowIfNull(tables);
        ArgumentNullException.ThrowIfNull(already);
        SortedSet<int> withheld = [.. already];
        foreach (SuppressionTable table in tables)
        {
            withheld.UnionWith(Enumerable.Range(0, table.Count).Where(i => table.IsSensitive(i) && table.ExposureOf(i) == CellExposure.Published));
        }

        bool isDone = withheld.Count == 0;
        while (!isDone)
        {
            int before = withheld.Count;
            foreach (SuppressionTable table in tables)
            {
                int[] further = [.. Exposed(table, withheld, []).Select(i => Complement(table, i, withheld)).Where(i => i >= 0).Distinct()];
                withheld.UnionWith(further);
            }

            isDone = withheld.Count == before;
        }

        return withheld;
    }

    /// <summary>The sensitive counts that a reader can work out although they are withheld.</summary>
    /// <param name="table">The table.</param>
    /// <param name="withheld">What is withheld.</param>
    /// <param name="revealed">Hidden counts that the reader knows nevertheless.</param>
    public static IReadOnlyList<int> Exposed(SuppressionTable table, IReadOnlySet<int> withheld, IReadOnlyList<int> revealed)
    {
        ArgumentNullException.ThrowIfNull(withheld);
        bool[] known = Known(table, withheld, revealed);
        return [.. withheld.Where(i => table.IsSensitive(i) && known[i])];
    }

    /// <summary>Which counts a reader of what is published can work out.</summary>
    private static bool[] Known(SuppressionTable table, IReadOnlySet<int> withheld, IReadOnlyList<int> revealed)
    {
        bool[] known = new bool[table.Count];
        for (int i = 0; i < known.Length; i++)
        {
            known[i] = table.ExposureOf(i) != CellExposure.Hidden && !withheld.Contains(i);
        }

        foreach (int item in revealed)
        {
            known[item] = true;
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
            if (!known[total])
            {
                continue;
            }

            long sum = 0;
            bool isOpen = false;
            foreach (int part in parts)
            {
                sum += known[part] ? table.CountOf(part) : 0;
                isOpen |= !known[part];
            }

            if (isOpen && sum == table.CountOf(total))
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
        LinearSystem system = new();
        foreach ((int total, int[] parts) in table.Sums)
        {
            Dictionary<int, long> row = [];
            foreach (int part in parts.Where(p => !known[p]))
            {
                row[part] = row.GetValueOrDefault(part) - 1;
            }

            if (!known[total])
            {
                row[total] = row.GetValueOrDefault(total) + 1;
            }

            system.Add(row);
        }

        bool isNews = false;
        foreach (int determined in system.Determined())
        {
            known[determined] = true;
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
