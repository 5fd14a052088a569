namespace Evenhand.Circuits.Structure;

/// <summary>A probabilistic circuit: an immutable directed acyclic graph of leaves, products and weighted sums, children before parents.</summary>
/// <remarks>
/// <para>A. Darwiche, "A Differential Approach to Inference in Bayesian Networks", Journal of the ACM 50 (2003); H. Poon and P. Domingos,
/// "Sum-Product Networks: A New Deep Architecture", UAI 2011. Every circuit is smooth (the parts of a sum have the same variables) and
/// decomposable (the parts of a product share none): a <see cref="CircuitBuilder"/> makes no other. A distribution is also normalised;
/// a function, as products of circuits are, need not be, and its numbers may be negative.</para>
/// <para>Nodes are held as a structure of arrays; those that the root does not reach are left out. The root is the last node.</para>
/// </remarks>
public sealed class Circuit
{
    private readonly NodeKind[] _kinds;
    private readonly int[] _first;
    private readonly int[] _children;
    private readonly double[] _weights;
    private readonly int[] _variables;
    private readonly int[] _firstParameter;
    private readonly double[] _parameters;
    private readonly long[] _ids;
    private readonly ScopeTable _scopes;
    private readonly int[] _scopeOf;
    private readonly Lazy<bool> _isDeterministic;

    internal Circuit(CircuitArrays arrays, ScopeTable scopes, int[] scopeOf)
    {
        Variables = arrays.Variables;
        _kinds = arrays.Kinds;
        _first = arrays.First;
        _children = arrays.Children;
        _weights = arrays.Weights;
        _variables = arrays.LeafVariables;
        _firstParameter = arrays.FirstParameter;
        _parameters = arrays.Parameters;
        _ids = arrays.Ids;
        IsNormalised = arrays.IsNormalised;
        _scopes = scopes;
        _scopeOf = scopeOf;
        _isDeterministic = new Lazy<bool>(() => SupportOverlap.IsDeterministic(this));
    }

    /// <summary>The variables; a circuit need not have a leaf for each.</summary>
    public IReadOnlyList<Variable> Variables { get; }

    /// <summary>Number of nodes.</summary>
    public int NodeCount => _kinds.Length;

    /// <summary>Number of edges.</summary>
    public int EdgeCount => _children.Length;

    /// <summary>The root: the last node.</summary>
    public int Root => _kinds.Length - 1;

    /// <summary>Whether every leaf and every sum adds up to one.</summary>
    public bool IsNormalised { get; }

    /// <summary>Whether at most one part of every sum is possible for any one completion, as far as supports show.</summary>
    /// <remarks>Computed when first asked for, never taken from a file. A true answer is proven; a false one may only mean that it could not be shown.</remarks>
    public bool IsDeterministic => _isDeterministic.Value;

    /// <summary>What a node is.</summary>
    public NodeKind KindOf(int node) => _kinds[node];

    /// <summary>The id under which a node was given, for messages.</summary>
    public long IdOf(int node) => _ids[node];

    /// <summary>The parts of a product or sum.</summary>
    public ReadOnlySpan<int> ChildrenOf(int node) => _children.AsSpan(_first[node], _first[node + 1] - _first[node]);

    /// <summary>The weights of a sum, one a part.</summary>
    public ReadOnlySpan<double> WeightsOf(int node) =>
        _kinds[node] == NodeKind.Sum ? _weights.AsSpan(_first[node], _first[node + 1] - _first[node]) : default;

    /// <summary>Index of a leaf's variable; −1 for other nodes.</summary>
    public int VariableOf(int node) => _variables[node];

    /// <summary>Whether a node is a leaf.</summary>
    public bool IsLeaf(int node) => _kinds[node] is NodeKind.Discrete or NodeKind.Gaussian;

    /// <summary>The numbers of a leaf: one a state; or mean, standard deviation, and the ends that it is cut off at.</summary>
    public ReadOnlySpan<double> ParametersOf(int leaf)
    {
        int count = _kinds[leaf] == NodeKind.Discrete ? Variables[_variables[leaf]].StateCount : Gaussian.ParameterCount;
        return IsLeaf(leaf) ? _parameters.AsSpan(_firstParameter[leaf], count) : default;
    }

    /// <summary>The index of a variable by its name, or −1.</summary>
    public int IndexOf(string variable)
    {
        for (int i = 0; i < Variables.Count; i++)
        {
            if (Variables[i].Name == variable)
            {
                return i;
            }
        }

        return -1;
    }

    /// <summary>Whether any leaf below the root is of a variable.</summary>
    public bool Has(int variable) => _scopes.Contains(_scopeOf[Root], variable);

    /// <summary>Whether any leaf below a node is of a variable.</summary>
    public bool Has(int node, int variable) => _scopes.Contains(_scopeOf[node], variable);

    /// <summary>Whether two nodes have the same variables.</summary>
    internal bool HaveSameScope(int a, int b) => _scopeOf[a] == _scopeOf[b];

    /// <summary>The variables of a node, as bits.</summary>
    internal ReadOnlySpan<ulong> ScopeOf(int node) => _scopes.BitsOf(_scopeOf[node]);
}
