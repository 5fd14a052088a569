namespace Evenhand.Circuits.Structure;

/// <summary>Whether two nodes, of one circuit or of two over the same variables, are possible for one and the same completion.</summary>
/// <remarks>
/// Exact where products of the two split their variables alike, which holds in structured circuits; where they do not, the answer is
/// yes, because nothing shows otherwise. Pairs are looked at once; no recursion.
/// </remarks>
internal sealed class SupportOverlap(Circuit left, Circuit right)
{
    // A pair is a few dozen bytes; beyond this a circuit is too entangled for the question.
    private const int MostPairs = 4_000_000;

    private readonly Dictionary<(int Left, int Right), bool?> _known = [];
    private readonly Stack<(int Left, int Right)> _open = [];

    /// <summary>Whether the parts of every sum exclude one another.</summary>
    public static bool IsDeterministic(Circuit circuit)
    {
        SupportOverlap overlap = new(circuit, circuit);
        for (int node = 0; node < circuit.NodeCount; node++)
        {
            ReadOnlySpan<int> parts = circuit.ChildrenOf(node);
            ReadOnlySpan<double> weights = circuit.WeightsOf(node);
            for (int i = 0; i < weights.Length; i++)
            {
                for (int j = 0; j < i; j++)
                {
                    if (weights[i] != 0 && weights[j] != 0 && overlap.Of(parts[i], parts[j]))
                    {
                        return false;
                    }
                }
            }
        }

        return true;
    }

    /// <summary>Whether a node of the left circuit and one of the right can be possible together.</summary>
    public bool Of(int leftNode, int rightNode)
    {
        _open.Push((leftNode, rightNode));
        while (_open.TryPeek(out (int Left, int Right) pair))
        {
            if (_known.GetValueOrDefault(pair) is not null)
            {
                _open.Pop();
            }
            else if (_known.Count > MostPairs)
            {
                return true;
            }
            else if (TryDecide(pair.Left, pair.Right, out bool overlaps))
            {
                _known[pair] = overlaps;
                _open.Pop();
            }
        }

        return _known[(leftNode, rightNode)]!.Value;
    }

    /// <summary>Decides a pair, or puts the pairs that it rests on before it.</summary>
    private bool TryDecide(int a, int b, out bool overlaps)
    {
        overlaps = false;
        if (left.IsLeaf(a) && right.IsLeaf(b))
        {
            overlaps = LeavesOverlap(a, b);
            return true;
        }

        if (left.KindOf(a) == NodeKind.Sum || right.KindOf(b) == NodeKind.Sum)
        {
            return TryAny(a, b, out overlaps);
        }

        return TryAll(a, b, out overlaps);
    }

    private bool LeavesOverlap(int a, int b)
    {
        if (left.KindOf(a) == NodeKind.Gaussian)
        {
            Gaussian x = Gaussian.Of(left.ParametersOf(a)), y = Gaussian.Of(right.ParametersOf(b));
            return x.IsPoint || y.IsPoint
                ? (x.IsPoint ? y.DensityAt(x.Mean) : x.DensityAt(y.Mean)) > 0
                : Math.Max(x.Low, y.Low) < Math.Min(x.High, y.High);
        }

        ReadOnlySpan<double> p = left.ParametersOf(a), q = right.ParametersOf(b);
        for (int s = 0; s < p.Length; s++)
        {
            if (p[s] != 0 && q[s] != 0)
            {
                return true;
            }
        }

        return false;
    }

    /// <summary>A sum overlaps with what any of its parts overlaps with.</summary>
    private bool TryAny(int a, int b, out bool overlaps)
    {
        bool isLeft = left.KindOf(a) == NodeKind.Sum;
        ReadOnlySpan<int> parts = isLeft ? left.ChildrenOf(a) : right.ChildrenOf(b);
        ReadOnlySpan<double> weights = isLeft ? left.WeightsOf(a) : right.WeightsOf(b);
        overlaps = false;
        for (int i = 0; i < parts.Length; i++)
        {
            if (weights[i] == 0)
            {
                continue;
            }

            (int, int) pair = isLeft ? (parts[i], b) : (a, parts[i]);
            if (_known.GetValueOrDefault(pair) is not { } known)
            {
                _open.Push(pair);
                return false;
            }

            if (known)
            {
                overlaps = true;
                return true;
            }
        }

        return true;
    }

    /// <summary>Two products overlap unless a part of one and a part of the other over the same variables do not.</summary>
    private bool TryAll(int a, int b, out bool overlaps)
    {
        overlaps = true;
        ReadOnlySpan<int> parts = PartsOf(left, a), others = PartsOf(right, b);
        foreach (int part in parts)
        {
            foreach (int other in others)
            {
                if (!left.ScopeOf(part).SequenceEqual(right.ScopeOf(other)))
                {
                    continue;
                }

                if (_known.GetValueOrDefault((part, other)) is not { } known)
                {
                    _open.Push((part, other));
                    return false;
                }

                if (!known)
                {
                    overlaps = false;
                    return true;
                }
            }
        }

        return true;
    }

    private static int[] PartsOf(Circuit circuit, int node) => circuit.IsLeaf(node) ? [node] : circuit.ChildrenOf(node).ToArray();
}
