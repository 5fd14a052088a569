using System.Globalization;
using Evenhand.Monitoring.Charters.Yaml;

namespace Evenhand.Monitoring.Charters;

/// <summary>Checks intersections, and that a field of many groups names a reference.</summary>
/// <remarks>Crossed groups may be many: without named references they are compared with the one of the highest rate.</remarks>
internal static class GroupingValidator
{
    /// <summary>Checks a draft.</summary>
    public static void Check(CharterDraft draft)
    {
        foreach (Drafted<GroupField> group in draft.Groups ?? [])
        {
            if (group.IsSound && group.Value.Reference is null && group.Value.ListedCount > CharterLimits.ComparedWithoutReference)
            {
                group.Map.Report(
                    "reference",
                    string.Create(CultureInfo.InvariantCulture, $"is missing for {group.Value.ListedCount} groups"),
                    "name one of them; beyond 12 groups, pairs are compared with a named reference only");
            }
        }

        var seen = new HashSet<string>(StringComparer.Ordinal);
        foreach ((IReadOnlyList<string> names, KeyedNode at) in draft.Intersections)
        {
            if (NamesHold(draft, names, at) && IsNew(names, at, seen))
            {
                Size(draft, names, at);
            }
        }
    }

    private static bool NamesHold(CharterDraft draft, IReadOnlyList<string> names, KeyedNode at)
    {
        int before = at.Problems.Count;
        if (names.Distinct(StringComparer.Ordinal).Count() < names.Count)
        {
            at.Report("crosses a group with itself", "name each group once");
        }

        foreach (string name in names.Distinct(StringComparer.Ordinal))
        {
            if (draft.Groups is not null && draft.Group(name) is null)
            {
                at.Report(
                    $"{QuotedText.Of(name)} is no group",
                    NearestName.Suggest(name, draft.Groups.Select(g => g.Value.Name).Where(n => n.Length > 0), "list it under groups"));
            }
        }

        return at.Problems.Count == before && draft.Groups is not null;
    }

    private static bool IsNew(IReadOnlyList<string> names, KeyedNode at, HashSet<string> seen)
    {
        bool isNew = seen.Add(string.Join('+', names.Order(StringComparer.Ordinal)));
        if (!isNew)
        {
            at.Report("crosses the same groups as an earlier entry", "remove one of the two");
        }

        return isNew;
    }

    private static void Size(CharterDraft draft, IReadOnlyList<string> names, KeyedNode at)
    {
        List<Drafted<GroupField>> groups = [.. names.Select(n => draft.Group(n)!)];
        if (!groups.TrueForAll(g => g.IsSound))
        {
            return;
        }

        // At most four factors of about a thousand each: no overflow.
        long codes = groups.Aggregate(1L, (n, g) => n * g.Value.CodeCount);
        if (codes > CharterLimits.JointCodes)
        {
            at.Report(
                string.Create(CultureInfo.InvariantCulture, $"makes {codes:N0} joint codes"),
                string.Create(CultureInfo.InvariantCulture, $"cross fewer groups or list fewer values; at most {CharterLimits.JointCodes:N0}"));
        }
    }
}
