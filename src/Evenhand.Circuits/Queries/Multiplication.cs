using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Queries;

/// <summary>The pointwise product of a circuit and a compatible function, as a circuit again.</summary>
/// <remarks>
/// A. Vergari, Y. Choi, A. Liu, S. Teso and G. Van den Broeck, "A Compositional Atlas of Tractable Circuit Operations for
/// Probabilistic Inference", NeurIPS 2021. Compatible: wherever products meet, they split the variables that they share alike. The
/// expectation of the function is the sum of the product. Pairs of nodes are made once; no recursion.
/// </remarks>
public sealed class Multiplication
{
    private readonly Circuit _left;
    private readonly Circuit _right;
    private readonly int[] _rightToLeft;
    private readonly Variable[] _variables;
    private readonly CircuitBuilder _builder;
    private readonly Dictionary<(int Left, int Right), int> _made = [];
    private readonly Stack<(int Left, int Right)> _open = [];

    private Multiplication(Circuit left, Circuit right, long limit)
    {
        _left = left;
        _right = right;
        List<Variable> variables = [.. left.Variables];
        _rightToLeft = new int[right.Variables.Count];
        for (int v = 0; v < _rightToLeft.Length; v++)
        {
            _rightToLeft[v] = IndexIn(variables, right.Variables[v]);
        }

        _variables = [.. variables];
        _builder = new CircuitBuilder(_variables, isFunction: true, limit);
    }

    /// <summary>Multiplies.</summary>
    /// <param name="left">A circuit.</param>
    /// <param name="right">A circuit over some of the same variables; a variable of one name must take the same values in both.</param>
    /// <param name="limit">Most nodes and edges of the result.</param>
    /// <exception cref="CircuitException">The two are not compatible; the message names the nodes and the reason.</exception>
    public static Circuit Of(Circuit left, Circuit right, long limit = CircuitBuilder.DefaultLimit)
    {
        ArgumentNullException.ThrowIfNull(left);
        ArgumentNullException.ThrowIfNull(right);
        Multiplication product = new(left, right, limit);
        return product._builder.Build(product.Make(left.Root, right.Root));
    }

    private static int IndexIn(List<Variable> variables, Variable variable)
    {
        int index = variables.FindIndex(v => v.Name == variable.Name);
        if (index >= 0 && !variables[index].IsSameAs(variable))
        {
            throw new CircuitException($"the variable {variable.Name} takes other values in one circuit than in the other");
        }

        if (index < 0)
        {
            index = variables.Count;
            variables.Add(variable);
        }

        return index;
    }

    private int Make(int left, int right)
    {
        _open.Push((left, right));
        while (_open.TryPeek(out (int Left, int Right) pair))
        {
            if (_made.ContainsKey(pair) || TryMake(pair.Left, pair.Right))
            {
                _open.Pop();
            }
        }

        return _made[(left, right)];
    }

    /// <summary>The product of two nodes; −1 on one side stands for no node there.</summary>
    private bool TryMake(int a, int b)
    {
        int made;
        if (a < 0 || b < 0)
        {
            if (!TryCopy(a, b, out made))
            {
                return false;
            }
        }
        else if (_left.KindOf(a) == NodeKind.Sum || _right.KindOf(b) == NodeKind.Sum)
        {
            if (!TrySum(a, b, out made))
            {
                return false;
            }
        }
        else if (_left.IsLeaf(a) && _right.IsLeaf(b) && _left.VariableOf(a) == _rightToLeft[_right.VariableOf(b)])
        {
            made = Leaf(a, b);
        }
        else if (!TryProduct(a, b, out made))
        {
            return false;
        }

        _made[(a, b)] = made;
        return true;
    }

    private bool TryCopy(int a, int b, out int made)
    {
        Circuit circuit = b < 0 ? _left : _right;
        int node = b < 0 ? a : b;
        made = 0;
        List<int> parts = [];
        foreach (int child in circuit.ChildrenOf(node))
        {
            (int, int) pair = b < 0 ? (child, -1) : (-1, child);
            if (!_made.TryGetValue(pair, out int part))
            {
                _open.Push(pair);
                return false;
            }

            parts.Add(part);
        }

        int variable = circuit.IsLeaf(node) ? (b < 0 ? circuit.VariableOf(node) : _rightToLeft[circuit.VariableOf(node)]) : -1;
        made = circuit.KindOf(node) switch
        {
            NodeKind.Discrete => _builder.AddDiscrete(variable, circuit.ParametersOf(node)),
            NodeKind.Gaussian => _builder.AddGaussian(variable, Gaussian.Of(circuit.ParametersOf(node))),
            NodeKind.Product => _builder.AddProduct(parts.ToArray()),
            _ => _builder.AddSum(parts.ToArray(), circuit.WeightsOf(node)),
        };
        return true;
    }

    /// <summary>A sum times anything is the sum of its parts times it.</summary>
    private bool TrySum(int a, int b, out int made)
    {
        bool isLeft = _left.KindOf(a) == NodeKind.Sum;
        ReadOnlySpan<int> children = isLeft ? _left.ChildrenOf(a) : _right.ChildrenOf(b);
        int[] parts = new int[children.Length];
        made = 0;
        for (int i = 0; i < parts.Length; i++)
        {
            (int, int) pair = isLeft ? (children[i], b) : (a, children[i]);
            if (!_made.TryGetValue(pair, out parts[i]))
            {
                _open.Push(pair);
                return false;
            }
        }

        made = _builder.AddSum(parts, isLeft ? _left.WeightsOf(a) : _right.WeightsOf(b));
        return true;
    }

    private int Leaf(int a, int b)
    {
        if (_left.KindOf(a) == NodeKind.Gaussian)
        {
            throw new CircuitException($"the product of two normal leaves of {_variables[_left.VariableOf(a)].Name} is no leaf: give the variable edges");
        }

        double[] product = _left.ParametersOf(a).ToArray();
        ReadOnlySpan<double> other = _right.ParametersOf(b);
        for (int s = 0; s < product.Length; s++)
        {
            product[s] *= other[s];
        }

        return _builder.AddDiscrete(_left.VariableOf(a), product);
    }

    /// <summary>Parts that share variables are multiplied with one another, one with one; the rest stand as they are.</summary>
    private bool TryProduct(int a, int b, out int made)
    {
        made = 0;
        int[] lefts = PartsOf(_left, a), rights = PartsOf(_right, b);
        int[] partner = new int[lefts.Length];
        bool[] isTaken = new bool[rights.Length];
        for (int i = 0; i < lefts.Length; i++)
        {
            partner[i] = -1;
            for (int j = 0; j < rights.Length; j++)
            {
                if (!Share(lefts[i], rights[j]))
                {
                    continue;
                }

                if (partner[i] >= 0 || isTaken[j])
                {
                    throw new CircuitException(FormattableString.Invariant(
                        $"the two circuits are not compatible: node {_left.IdOf(a)} of the one and node {_right.IdOf(b)} of the other split their variables differently"));
                }

                partner[i] = j;
                isTaken[j] = true;
            }
        }

        IEnumerable<(int, int)> pairs = lefts.Select((part, i) => (part, partner[i] < 0 ? -1 : rights[partner[i]]))
            .Concat(rights.Where((_, j) => !isTaken[j]).Select(part => (-1, part)));
        List<int> parts = [];
        foreach ((int, int) pair in pairs)
        {
            if (!_made.TryGetValue(pair, out int part))
            {
                _open.Push(pair);
                return false;
            }

            parts.Add(part);
        }

        made = _builder.AddProduct(parts.ToArray());
        return true;
    }

    private bool Share(int a, int b)
    {
        for (int v = 0; v < _rightToLeft.Length; v++)
        {
            if (_rightToLeft[v] < _left.Variables.Count && _right.Has(b, v) && _left.Has(a, _rightToLeft[v]))
            {
                return true;
            }
        }

        return false;
    }

    private static int[] PartsOf(Circuit circuit, int node) => circuit.IsLeaf(node) ? [node] : circuit.ChildrenOf(node).ToArray();
}
