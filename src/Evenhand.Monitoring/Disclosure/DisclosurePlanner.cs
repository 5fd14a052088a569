using Evenhand.Monitoring.Windows;

namespace Evenhand.Monitoring.Disclosure;

/// <summary>Decides which cells of a snapshot must not leave the store.</summary>
/// <remarks>
/// <para>A group of at least one and fewer than <c>minimum_cell</c> people is withheld, and with it as many others of its window as it
/// takes that it cannot be worked out from totals, margins of crossed groups and slices. A group of nobody is not shown either, but
/// nothing is withheld to hide that it is empty. The same holds for how many of a group have a known outcome, and a score.</para>
/// <para>How many labels are missing or unlisted is about the data, not a group of people, and is always published. Windows that
/// overlap are planned apart: differences between them are not protected.</para>
/// </remarks>
public static class DisclosurePlanner
{
    // Beyond this, slices share one pattern: the audit grows with what is withheld in all of them together.
    private const int MostItemsTogether = 3000;

    /// <summary>Plans every window.</summary>
    /// <param name="layout">What stands where.</param>
    /// <param name="sums">Everything that the snapshot publishes numbers of, baselines under their own names among it.</param>
    public static WithheldCells Plan(SumLayout layout, IEnumerable<WindowSums> sums)
    {
        ArgumentNullException.ThrowIfNull(layout);
        ArgumentNullException.ThrowIfNull(sums);
        WithheldCells withheld = new(layout.Charter.MinimumCell);
        if (withheld.Minimum > 0)
        {
            foreach (IGrouping<string, WindowSums> window in sums.GroupBy(s => s.Window))
            {
                new WindowPlan(layout, [.. window], withheld).Add();
            }
        }

        return withheld;
    }

    private sealed class WindowPlan(SumLayout layout, WindowSums[] slices, WithheldCells withheld)
    {
        private readonly bool _isTogether = slices.Length * layout.Groupings.Sum(g => g.Cells) <= MostItemsTogether;

        /// <summary>Numbers the cells; every table of the window numbers them alike.</summary>
        private WindowTable? _numbers;

        public void Add()
        {
            WindowTable[] tables = Tables(new DecidedCount(withheld.Minimum));
            _numbers = tables[0];
            IReadOnlySet<int> small = Plan(tables, new HashSet<int>());
            AddCells(small, WithheldPart.All);
            AddEmptyGroups();
            AddKnownShares(tables, small);
            if (layout.Charter.Outcome is not null)
            {
                AddCells(Plan(Tables(new OutcomeCount(withheld.Minimum)), small), WithheldPart.Outcomes);
            }

            if (layout.Charter.Score is not null)
            {
                AddCells(Plan(Tables(new ScoredCount(withheld.Minimum)), small), WithheldPart.Scores);
            }

            if (layout.Strata > 0)
            {
                AddCells(Plan(Tables(new StratumCount(withheld.Minimum)), small), WithheldPart.Strata);
                AddStrataOfGroups(small);
            }
        }

        /// <summary>One table of all slices, or one of each.</summary>
        private WindowTable[] Tables(CountRule rule) => _isTogether
            ? [new WindowTable(layout, slices, rule)]
            : [.. slices.Select(s => new WindowTable(layout, [s], rule))];

        private static IReadOnlySet<int> Plan(WindowTable[] tables, IReadOnlySet<int> already) =>
            ComplementarySuppression.Plan([.. tables.Select(t => t.Table)], already);

        private void AddCells(IReadOnlySet<int> items, WithheldPart part)
        {
            ForEachCell((slice, g, cell, item) =>
            {
                if (items.Contains(item))
                {
                    withheld.Add(slices[slice].Window, slices[slice].Slice, layout.Groupings[g].Name, cell, part);
                }
            });
        }

        private void AddEmptyGroups()
        {
            ForEachCell((slice, g, cell, _) =>
            {
                GroupingShape shape = layout.Groupings[g];
                if (shape.Name is not null && shape.IsListed(cell) && slices[slice].Counts(shape, cell).Decided == 0)
                {
                    withheld.Add(slices[slice].Window, slices[slice].Slice, shape.Name, cell);
                }
            });
        }

        private void ForEachCell(Action<int, int, int, int> act)
        {
            for (int slice = 0; slice < slices.Length; slice++)
            {
                for (int g = 0; g < layout.Groupings.Count; g++)
                {
                    for (int cell = 0; cell < layout.Groupings[g].Cells; cell++)
                    {
                        act(slice, g, cell, _numbers!.Item(_isTogether ? slice : 0, g, cell));
                    }
                }
            }
        }

        /// <summary>The share of listed labels tells how many declined; it stays unless that gives a cell away.</summary>
        private void AddKnownShares(WindowTable[] tables, IReadOnlySet<int> small)
        {
            (int Slice, int Grouping)[] shares =
            [
                .. Enumerable.Range(0, _isTogether ? slices.Length : 1)
                    .SelectMany(s => Enumerable.Range(1, layout.Groupings.Count - 1).Select(g => (s, g))),
            ];
            if (IsSafe(tables, small, [.. shares.Select(s => tables[0].ListedTotal(s.Slice, s.Grouping))]))
            {
                return;
            }

            List<int> shown = [];
            foreach ((int slice, int g) in shares)
            {
                int item = tables[0].ListedTotal(slice, g);
                if (IsSafe(tables, small, [.. shown, item]))
                {
                    shown.Add(item);
                    continue;
                }

                foreach (WindowSums sums in _isTogether ? [slices[slice]] : slices)
                {
                    withheld.Add(sums.Window, sums.Slice, layout.Groupings[g].Name, WithheldCells.WholeGrouping, WithheldPart.KnownShare);
                }
            }
        }

        private static bool IsSafe(WindowTable[] tables, IReadOnlySet<int> small, IReadOnlyList<int> shown) =>
            small.Count == 0 || tables.All(t => ComplementarySuppression.Exposed(t.Table, small, shown).Count == 0);

        /// <summary>
        /// Strata of a field that is a group are crossed groups themselves: where any cell of such a grouping is withheld, so are all
        /// strata, and where one of those has a declined label, so are the readings, whose denominators leave the declined out.
        /// </summary>
        private void AddStrataOfGroups(IReadOnlySet<int> small)
        {
            HashSet<string> adjusted = [.. layout.Charter.Adjust.Select(a => a.Field)];
            bool isExposed = false, isDeclined = false;
            ForEachCell((_, g, cell, item) =>
            {
                GroupingShape shape = layout.Groupings[g];
                if (small.Contains(item) && shape.Fields.Any(f => adjusted.Contains(f.Name)))
                {
                    isExposed = true;
                    isDeclined |= Enumerable.Range(0, shape.Fields.Count).Any(i => shape.CodeOf(cell, i) == shape.Fields[i].DeclinedCode);
                }
            });
            foreach (WithheldPart part in isDeclined ? [WithheldPart.Strata, WithheldPart.Adjusted] : isExposed ? new[] { WithheldPart.Strata } : [])
            {
                ForEachCell((slice, g, cell, _) => withheld.Add(slices[slice].Window, slices[slice].Slice, layout.Groupings[g].Name, cell, part));
            }
        }
    }
}
