using Evenhand.Circuits.Profiles;
using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Learning;

/// <summary>A sample to learn from, column by column, as codes.</summary>
public sealed class TrainingTable
{
    /// <summary>Takes a sample.</summary>
    /// <param name="groups">The group variables.</param>
    /// <param name="decision">The decision; null for plain data.</param>
    /// <param name="fields">The input fields.</param>
    /// <param name="labels">By group and record the code of the label; the number of states where it is missing.</param>
    /// <param name="decisions">By record the decision; the number of decisions where it is missing. Empty for plain data.</param>
    /// <param name="values">By field and record the code of the value; the number of states where it is missing.</param>
    public TrainingTable(IReadOnlyList<Variable> groups, Variable? decision, IReadOnlyList<Variable> fields, ushort[][] labels, ushort[] decisions, ushort[][] values)
    {
        ArgumentNullException.ThrowIfNull(groups);
        ArgumentNullException.ThrowIfNull(fields);
        ArgumentNullException.ThrowIfNull(labels);
        ArgumentNullException.ThrowIfNull(decisions);
        ArgumentNullException.ThrowIfNull(values);
        if (labels.Length != groups.Count || values.Length != fields.Count || fields.Count == 0)
        {
            throw new ArgumentException("one column a variable, and at least one field", nameof(values));
        }

        Groups = groups;
        Decision = decision;
        Fields = fields;
        Labels = labels;
        Decisions = decisions;
        Values = values;
        Records = values[0].Length;
        if (labels.Concat(values).Any(c => c.Length != Records) || (decision is not null && decisions.Length != Records))
        {
            throw new ArgumentException("columns of one length", nameof(values));
        }
    }

    /// <summary>The group variables.</summary>
    public IReadOnlyList<Variable> Groups { get; }

    /// <summary>The decision; null for plain data.</summary>
    public Variable? Decision { get; }

    /// <summary>The input fields.</summary>
    public IReadOnlyList<Variable> Fields { get; }

    /// <summary>Number of records.</summary>
    public int Records { get; }

    /// <summary>By group and record the code of the label.</summary>
    public ushort[][] Labels { get; }

    /// <summary>By record the decision; empty for plain data.</summary>
    public ushort[] Decisions { get; }

    /// <summary>By field and record the code of the value.</summary>
    public ushort[][] Values { get; }

    /// <summary>Some of the records, in the order given.</summary>
    public TrainingTable Rows(ReadOnlySpan<int> rows)
    {
        int[] picked = rows.ToArray();
        ushort[] pick(ushort[] column) => [.. picked.Select(r => column[r])];
        return new TrainingTable(Groups, Decision, Fields, [.. Labels.Select(pick)], Decision is null ? [] : pick(Decisions), [.. Values.Select(pick)]);
    }

    /// <summary>Two parts at random: the second of a share of the records.</summary>
    /// <param name="share">Share of the second part, in (0, 1).</param>
    /// <param name="seed">Seed; the same seed splits alike.</param>
    public (TrainingTable First, TrainingTable Second) Split(double share, int seed)
    {
        int[] order = [.. Enumerable.Range(0, Records)];
        new Random(seed).Shuffle(order);
        int second = Math.Clamp((int)Math.Round(share * Records), 1, Math.Max(1, Records - 1));
        int[] held = order[..second], rest = order[second..];
        Array.Sort(held);
        Array.Sort(rest);
        return (Rows(rest), Rows(held));
    }

    /// <summary>Fills a block with records.</summary>
    internal void Fill<T>(ProfileBlock<T> block, ProfileShape shape, ReadOnlySpan<int> rows)
        where T : unmanaged
    {
        block.Count = rows.Length;
        for (int f = 0; f < Values.Length; f++)
        {
            ushort[] from = Values[f], to = block.Codes[f];
            for (int e = 0; e < rows.Length; e++)
            {
                to[e] = from[rows[e]];
            }
        }

        Span<ushort> labels = stackalloc ushort[Labels.Length];
        for (int e = 0; e < rows.Length; e++)
        {
            for (int g = 0; g < labels.Length; g++)
            {
                labels[g] = Labels[g][rows[e]];
            }

            block.Evidence[e] = shape.EvidenceOf(labels, Decision is null ? 0 : Decisions[rows[e]]);
        }
    }
}
