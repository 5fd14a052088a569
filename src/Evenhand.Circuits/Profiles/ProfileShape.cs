using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Profiles;

/// <summary>What a profile circuit is over: groups, a decision, input fields on a tree, and the number of profiles.</summary>
/// <remarks>
/// <para>A hidden Chow–Liu tree (A. Liu and G. Van den Broeck, "Tractable Regularization of Probabilistic Circuits", NeurIPS 2021) below
/// the cells of groups and decision. Inner fields of the tree have a hidden state of their own; the root's is the profile. A field that
/// is a leaf of the tree emits straight from its parent's hidden state, which is at least as expressive and costs no K × K step.</para>
/// <para>Cells are numbered group by group, the decision running fastest. Label evidence is numbered likewise with one more code each for
/// "missing".</para>
/// </remarks>
public sealed class ProfileShape
{
    private readonly int[] _cellStrides;
    private readonly int[] _evidenceStrides;
    private readonly int[][] _allowed;
    private readonly int[] _patterns;

    /// <summary>Lays out a profile circuit.</summary>
    /// <param name="profiles">Number of hidden states K, at least 1.</param>
    /// <param name="groups">The group variables, each with its listed values; none for plain data.</param>
    /// <param name="decision">The decision, with two states; null for plain data.</param>
    /// <param name="fields">The input fields, with states, at least one.</param>
    /// <param name="parents">For each field its parent on the tree, −1 for the root.</param>
    /// <exception cref="ArgumentException">Not a tree, or a variable without states.</exception>
    public ProfileShape(int profiles, IReadOnlyList<Variable> groups, Variable? decision, IReadOnlyList<Variable> fields, IReadOnlyList<int> parents)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(profiles, 1);
        ArgumentNullException.ThrowIfNull(groups);
        ArgumentNullException.ThrowIfNull(fields);
        ArgumentNullException.ThrowIfNull(parents);
        if (fields.Count == 0 || parents.Count != fields.Count || groups.Concat(fields).Any(v => v.StateCount == 0))
        {
            throw new ArgumentException("a profile circuit needs a field, a parent for each, and states of each variable", nameof(fields));
        }

        Profiles = profiles;
        Groups = [.. groups];
        Decision = decision;
        Fields = [.. fields];
        Parents = [.. parents];
        (Inner, Leaves) = Order(Parents);
        _cellStrides = Strides(0);
        _evidenceStrides = Strides(1);
        CellCount = _cellStrides[0];
        EvidenceCount = _evidenceStrides[0];
        _allowed = [.. Enumerable.Range(0, EvidenceCount).Select(e => Enumerable.Range(0, CellCount).Where(c => Allows(e, c)).ToArray())];
        _patterns = [.. Enumerable.Range(0, EvidenceCount).Select(PatternOf)];
    }

    /// <summary>Number of hidden states.</summary>
    public int Profiles { get; }

    /// <summary>The group variables.</summary>
    public IReadOnlyList<Variable> Groups { get; }

    /// <summary>The decision; null for plain data.</summary>
    public Variable? Decision { get; }

    /// <summary>Number of decisions: 2, or 1 for plain data.</summary>
    public int Decisions => Decision?.StateCount ?? 1;

    /// <summary>The input fields.</summary>
    public IReadOnlyList<Variable> Fields { get; }

    /// <summary>The parent of each field; −1 for the root.</summary>
    public IReadOnlyList<int> Parents { get; }

    /// <summary>The fields with a hidden state, children before parents; the last is the root.</summary>
    public IReadOnlyList<int> Inner { get; }

    /// <summary>For each field the leaf fields that emit from its hidden state.</summary>
    public IReadOnlyList<int[]> Leaves { get; }

    /// <summary>The root field.</summary>
    public int Root => Inner[^1];

    /// <summary>Number of cells of groups and decision.</summary>
    public int CellCount { get; }

    /// <summary>Number of kinds of evidence about groups and decision: each known or missing.</summary>
    public int EvidenceCount { get; }

    /// <summary>Number of patterns of which labels are known.</summary>
    public int PatternCount => 1 << Groups.Count;

    /// <summary>The number of evidence.</summary>
    /// <param name="labels">The code of each group; its number of states where the label is missing.</param>
    /// <param name="decision">The decision; the number of decisions where it is missing. 0 for plain data.</param>
    public int EvidenceOf(ReadOnlySpan<ushort> labels, int decision)
    {
        int evidence = Decision is null ? 0 : decision;
        for (int g = 0; g < Groups.Count; g++)
        {
            evidence += labels[g] * _evidenceStrides[g + 1];
        }

        return evidence;
    }

    /// <summary>The group codes and the decision of a cell.</summary>
    public (int[] Groups, int Decision) CellOf(int cell)
    {
        int[] codes = new int[Groups.Count];
        for (int g = 0; g < codes.Length; g++)
        {
            codes[g] = cell / _cellStrides[g + 1] % Groups[g].StateCount;
        }

        return (codes, cell % Decisions);
    }

    /// <summary>The cells that evidence allows.</summary>
    public ReadOnlySpan<int> CellsOf(int evidence) => _allowed[evidence];

    /// <summary>The decision of a cell.</summary>
    public int DecisionOf(int cell) => cell % Decisions;

    /// <summary>The pattern of known labels of evidence: bit g for group g.</summary>
    public int KnownLabelsOf(int evidence) => _patterns[evidence];

    /// <summary>Whether evidence allows a cell.</summary>
    private bool Allows(int evidence, int cell)
    {
        (int[] codes, int decision) = CellOf(cell);
        (int[] labels, int given) = LabelsOf(evidence);
        bool allows = Decision is null || given == Decisions || given == decision;
        for (int g = 0; g < codes.Length; g++)
        {
            allows &= labels[g] == Groups[g].StateCount || labels[g] == codes[g];
        }

        return allows;
    }

    private int PatternOf(int evidence)
    {
        (int[] labels, _) = LabelsOf(evidence);
        int pattern = 0;
        for (int g = 0; g < labels.Length; g++)
        {
            pattern |= labels[g] < Groups[g].StateCount ? 1 << g : 0;
        }

        return pattern;
    }

    /// <summary>The label codes and the decision of evidence.</summary>
    public (int[] Labels, int Decision) LabelsOf(int evidence)
    {
        int[] labels = new int[Groups.Count];
        for (int g = 0; g < labels.Length; g++)
        {
            labels[g] = evidence / _evidenceStrides[g + 1] % (Groups[g].StateCount + 1);
        }

        return (labels, Decision is null ? 0 : evidence % (Decisions + 1));
    }

    /// <summary>Strides of mixed numbers, the whole first; each digit has some codes more than states.</summary>
    private int[] Strides(int more)
    {
        int[] strides = new int[Groups.Count + 1];
        int size = Decision is null ? 1 : Decisions + more;
        for (int g = Groups.Count - 1; g >= 0; g--)
        {
            strides[g + 1] = size;
            size = checked(size * (Groups[g].StateCount + more));
        }

        strides[0] = size;
        return strides;
    }

    private static (int[] Inner, int[][] Leaves) Order(IReadOnlyList<int> parents)
    {
        int root = parents.Count(p => p < 0) == 1 ? parents.ToList().IndexOf(-1) : throw new ArgumentException("the tree needs one root", nameof(parents));
        List<int>[] children = [.. parents.Select(_ => new List<int>())];
        for (int f = 0; f < parents.Count; f++)
        {
            if (parents[f] >= 0)
            {
                children[parents[f]].Add(f);
            }
        }

        List<int> down = [];
        Queue<int> open = new([root]);
        while (open.TryDequeue(out int field))
        {
            down.Add(field);
            children[field].ForEach(open.Enqueue);
        }

        if (down.Count != parents.Count)
        {
            throw new ArgumentException("the parents are no tree", nameof(parents));
        }

        down.Reverse();
        int[] inner = [.. down.Where(f => f == root || children[f].Count > 0)];
        return (inner, [.. children.Select(c => c.Where(f => children[f].Count == 0).ToArray())]);
    }
}
