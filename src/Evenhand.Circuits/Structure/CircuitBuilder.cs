namespace Evenhand.Circuits.Structure;

/// <summary>Builds a circuit from its leaves up and refuses one that is not smooth, decomposable and, for a distribution, normalised.</summary>
/// <remarks>Not thread-safe.</remarks>
public sealed class CircuitBuilder
{
    /// <summary>Most nodes and edges together, unless another limit is given.</summary>
    public const int DefaultLimit = 50_000_000;

    /// <summary>How far weights and probabilities may add up to something other than one.</summary>
    public const double Tolerance = 1e-9;

    private readonly IReadOnlyList<Variable> _variables;
    private readonly bool _isFunction;
    private readonly long _limit;
    private readonly ScopeTable _scopes;
    private readonly List<NodeKind> _kinds = [];
    private readonly List<int> _first = [0];
    private readonly List<int> _children = [];
    private readonly List<double> _weights = [];
    private readonly List<int> _leafVariables = [];
    private readonly List<int> _firstParameter = [];
    private readonly List<double> _parameters = [];
    private readonly List<long> _ids = [];
    private readonly List<int> _scopeOf = [];

    /// <summary>Starts with no node.</summary>
    /// <param name="variables">The variables, of different names.</param>
    /// <param name="isFunction">Whether numbers need neither be positive nor add up to one.</param>
    /// <param name="limit">Most nodes and edges together.</param>
    /// <exception cref="CircuitException">Two variables of one name.</exception>
    public CircuitBuilder(IReadOnlyList<Variable> variables, bool isFunction = false, long limit = DefaultLimit)
    {
        ArgumentNullException.ThrowIfNull(variables);
        _variables = variables;
        _isFunction = isFunction;
        _limit = limit;
        _scopes = new ScopeTable(variables.Count);
        HashSet<string> names = [];
        if (variables.FirstOrDefault(v => !names.Add(v.Name)) is { } twice)
        {
            throw new CircuitException($"the variable {twice.Name} stands twice");
        }
    }

    /// <summary>Number of nodes so far.</summary>
    public int Count => _kinds.Count;

    /// <summary>Adds a distribution over a variable's states.</summary>
    /// <param name="variable">Index of the variable; it must have states.</param>
    /// <param name="p">One number a state.</param>
    /// <param name="id">The node's id in messages; by default its number.</param>
    /// <returns>The node.</returns>
    public int AddDiscrete(int variable, ReadOnlySpan<double> p, long? id = null)
    {
        long name = id ?? Count;
        Variable of = _variables[variable];
        if (of.IsContinuous)
        {
            throw new CircuitException(name, $"{of.Name} has neither values nor edges, so it takes mean and sd, not p");
        }

        if (p.Length != of.StateCount)
        {
            throw new CircuitException(name, FormattableString.Invariant($"{p.Length} probabilities for the {of.StateCount} states of {of.Name}"));
        }

        CheckNumbers(name, p, "p");
        return AddLeaf(NodeKind.Discrete, variable, p, name);
    }

    /// <summary>Adds a normal distribution of a continuous variable.</summary>
    /// <param name="variable">Index of the variable; it must be continuous.</param>
    /// <param name="gaussian">Its numbers.</param>
    /// <param name="id">The node's id in messages; by default its number.</param>
    /// <returns>The node.</returns>
    public int AddGaussian(int variable, Gaussian gaussian, long? id = null)
    {
        long name = id ?? Count;
        Variable of = _variables[variable];
        if (!of.IsContinuous)
        {
            throw new CircuitException(name, $"{of.Name} has {(of.Kind == VariableKind.Category ? "values" : "edges")}, so it takes p, not mean and sd");
        }

        if (!double.IsFinite(gaussian.Mean) || !double.IsFinite(gaussian.Deviation) || gaussian.Deviation < 0)
        {
            throw new CircuitException(name, "mean must be finite and sd finite and above 0");
        }

        return AddLeaf(NodeKind.Gaussian, variable, [gaussian.Mean, gaussian.Deviation, gaussian.Low, gaussian.High], name);
    }

    /// <summary>Adds a product of nodes.</summary>
    /// <returns>The node.</returns>
    public int AddProduct(ReadOnlySpan<int> children, long? id = null)
    {
        long name = id ?? Count;
        int[] scopes = ScopesOf(name, children);
        int scope = _scopes.DisjointUnion(scopes, out int shared);
        if (scope < 0)
        {
            throw new CircuitException(name, $"is not decomposable: two of its parts have the variable {_variables[shared].Name}");
        }

        for (int i = 0; i < children.Length; i++)
        {
            _weights.Add(1);
        }

        return Add(NodeKind.Product, children, -1, scope, name);
    }

    /// <summary>Adds a weighted sum of nodes.</summary>
    /// <returns>The node.</returns>
    public int AddSum(ReadOnlySpan<int> children, ReadOnlySpan<double> weights, long? id = null)
    {
        long name = id ?? Count;
        if (weights.Length != children.Length)
        {
            throw new CircuitException(name, FormattableString.Invariant($"{weights.Length} weights for {children.Length} parts"));
        }

        int[] scopes = ScopesOf(name, children);
        CheckNumbers(name, weights, "weights");
        for (int i = 1; i < scopes.Length; i++)
        {
            if (scopes[i] != scopes[0])
            {
                Variable odd = _variables[_scopes.Difference(scopes[i], scopes[0])];
                throw new CircuitException(name, $"is not smooth: the variable {odd.Name} is in some of its parts and not in others");
            }
        }

        _weights.AddRange(weights);
        return Add(NodeKind.Sum, children, -1, scopes[0], name);
    }

    /// <summary>The circuit below a root.</summary>
    public Circuit Build(int root)
    {
        ArgumentOutOfRangeException.ThrowIfGreaterThanOrEqual((uint)root, (uint)Count, nameof(root));
        int[] place = Reached(root);
        List<NodeKind> kinds = [];
        List<int> first = [0], children = [], variables = [], firstParameter = [], scopeOf = [];
        List<double> weights = [];
        List<long> ids = [];
        for (int node = 0; node <= root; node++)
        {
            if (place[node] < 0)
            {
                continue;
            }

            place[node] = kinds.Count;
            for (int e = _first[node]; e < _first[node + 1]; e++)
            {
                children.Add(place[_children[e]]);
                weights.Add(_weights[e]);
            }

            kinds.Add(_kinds[node]);
            first.Add(children.Count);
            variables.Add(_leafVariables[node]);
            firstParameter.Add(_firstParameter[node]);
            scopeOf.Add(_scopeOf[node]);
            ids.Add(_ids[node]);
        }

        CircuitArrays arrays = new()
        {
            Variables = _variables,
            Kinds = [.. kinds],
            First = [.. first],
            Children = [.. children],
            Weights = [.. weights],
            LeafVariables = [.. variables],
            FirstParameter = [.. firstParameter],
            Parameters = [.. _parameters],
            Ids = [.. ids],
            IsNormalised = !_isFunction,
        };
        return new Circuit(arrays, _scopes, [.. scopeOf]);
    }

    /// <summary>0 for the nodes below the root, −1 for others.</summary>
    private int[] Reached(int root)
    {
        int[] place = new int[Count];
        Array.Fill(place, -1);
        place[root] = 0;
        for (int node = root; node >= 0; node--)
        {
            for (int e = _first[node]; place[node] == 0 && e < _first[node + 1]; e++)
            {
                place[_children[e]] = 0;
            }
        }

        return place;
    }

    private int[] ScopesOf(long id, ReadOnlySpan<int> children)
    {
        if (children.IsEmpty)
        {
            throw new CircuitException(id, "has no parts");
        }

        int[] scopes = new int[children.Length];
        for (int i = 0; i < scopes.Length; i++)
        {
            ArgumentOutOfRangeException.ThrowIfGreaterThanOrEqual((uint)children[i], (uint)Count, nameof(children));
            scopes[i] = _scopeOf[children[i]];
        }

        return scopes;
    }

    private void CheckNumbers(long id, ReadOnlySpan<double> numbers, string key)
    {
        double sum = 0;
        foreach (double number in numbers)
        {
            if (!double.IsFinite(number) || (number < 0 && !_isFunction))
            {
                throw new CircuitException(id, FormattableString.Invariant($"{key} holds {number}, which is no {(_isFunction ? "finite number" : "probability")}"));
            }

            sum += number;
        }

        if (!_isFunction && Math.Abs(sum - 1) > Tolerance)
        {
            throw new CircuitException(id, FormattableString.Invariant($"is not normalised: {key} add up to {sum}, not 1"));
        }
    }

    private int AddLeaf(NodeKind kind, int variable, ReadOnlySpan<double> numbers, long id)
    {
        int node = Add(kind, default, variable, _scopes.Of(variable), id);
        _parameters.AddRange(numbers);
        return node;
    }

    private int Add(NodeKind kind, ReadOnlySpan<int> children, int variable, int scope, long id)
    {
        if ((long)Count + _children.Count + children.Length >= _limit)
        {
            throw new CircuitException(id, FormattableString.Invariant($"is one too many: at most {_limit:N0} nodes and edges together"));
        }

        _firstParameter.Add(_parameters.Count);
        _kinds.Add(kind);
        _children.AddRange(children);
        _first.Add(_children.Count);
        _leafVariables.Add(variable);
        _scopeOf.Add(scope);
        _ids.Add(id);
        return Count - 1;
    }
}
