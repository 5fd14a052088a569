using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Queries;

/// <summary>The Kullback–Leibler divergence of deterministic circuits of one structure.</summary>
/// <remarks>
/// A completion takes one way through a deterministic circuit; where both circuits take the same, ln p − ln q is a sum over the nodes
/// on it, and its expectation a sum over all nodes of flow times the node's own divergence (Vergari et al. 2021, table 2).
/// </remarks>
public static class Divergence
{
    /// <summary>KL(p ‖ q) in nats; +∞ where q excludes what p allows.</summary>
    /// <exception cref="CircuitException">A property is missing; the message says which.</exception>
    public static double Of(Circuit p, Circuit q)
    {
        ArgumentNullException.ThrowIfNull(p);
        ArgumentNullException.ThrowIfNull(q);
        RequireDeterministic(p, "the first circuit");
        RequireDeterministic(q, "the second circuit");
        int[] partner = Align(p, q);
        RequireSameWays(p, q, partner);
        double[] flows = Flows.Of(p);
        double sum = 0;
        for (int node = 0; node < partner.Length; node++)
        {
            if (flows[node] > 0 && p.KindOf(node) != NodeKind.Product)
            {
                sum += flows[node] * Own(p, node, q, partner[node]);
            }
        }

        return sum;
    }

    private static void RequireDeterministic(Circuit circuit, string which)
    {
        if (!circuit.IsDeterministic)
        {
            throw new CircuitException($"the divergence needs deterministic circuits; {which} is not deterministic: two parts of a sum are possible together");
        }
    }

    /// <summary>The node of q that stands where each node of p does.</summary>
    private static int[] Align(Circuit p, Circuit q)
    {
        int[] partner = new int[p.NodeCount];
        Array.Fill(partner, -1);
        Stack<(int P, int Q)> open = new([(p.Root, q.Root)]);
        while (open.TryPop(out (int P, int Q) pair))
        {
            if (partner[pair.P] == pair.Q)
            {
                continue;
            }

            if (partner[pair.P] >= 0 || !IsAlike(p, pair.P, q, pair.Q))
            {
                throw new CircuitException(FormattableString.Invariant(
                    $"the divergence needs circuits of one structure; node {p.IdOf(pair.P)} of the first and node {q.IdOf(pair.Q)} of the second differ in kind, parts or variable"));
            }

            partner[pair.P] = pair.Q;
            ReadOnlySpan<int> parts = p.ChildrenOf(pair.P), others = q.ChildrenOf(pair.Q);
            for (int i = 0; i < parts.Length; i++)
            {
                open.Push((parts[i], others[i]));
            }
        }

        return partner;
    }

    private static bool IsAlike(Circuit p, int a, Circuit q, int b) =>
        p.KindOf(a) == q.KindOf(b)
        && p.ChildrenOf(a).Length == q.ChildrenOf(b).Length
        && (!p.IsLeaf(a) || p.Variables[p.VariableOf(a)].IsSameAs(q.Variables[q.VariableOf(b)]));

    /// <summary>No completion may go by one part of a sum in p and by another in q.</summary>
    private static void RequireSameWays(Circuit p, Circuit q, int[] partner)
    {
        SupportOverlap overlap = new(p, q);
        for (int node = 0; node < partner.Length; node++)
        {
            ReadOnlySpan<int> parts = p.ChildrenOf(node);
            for (int i = 0; p.KindOf(node) == NodeKind.Sum && i < parts.Length; i++)
            {
                for (int j = 0; j < parts.Length; j++)
                {
                    if (i != j && overlap.Of(parts[i], q.ChildrenOf(partner[node])[j]))
                    {
                        throw new CircuitException(FormattableString.Invariant(
                            $"the divergence needs circuits that take the same way for each completion; parts {i + 1} and {j + 1} of node {p.IdOf(node)} do not"));
                    }
                }
            }
        }
    }

    private static double Own(Circuit p, int node, Circuit q, int other)
    {
        if (p.KindOf(node) == NodeKind.Gaussian)
        {
            return OfNormals(Gaussian.Of(p.ParametersOf(node)), Gaussian.Of(q.ParametersOf(other)));
        }

        bool isSum = p.KindOf(node) == NodeKind.Sum;
        return OfWeights(isSum ? p.WeightsOf(node) : p.ParametersOf(node), isSum ? q.WeightsOf(other) : q.ParametersOf(other));
    }

    private static double OfWeights(ReadOnlySpan<double> p, ReadOnlySpan<double> q)
    {
        double sum = 0;
        for (int i = 0; i < p.Length; i++)
        {
            if (p[i] > 0)
            {
                sum += q[i] > 0 ? p[i] * Math.Log(p[i] / q[i]) : double.PositiveInfinity;
            }
        }

        return sum;
    }

    /// <summary>Of two normal leaves, whole or cut off at the same ends.</summary>
    private static double OfNormals(Gaussian p, Gaussian q)
    {
        if (p.IsPoint || q.IsPoint)
        {
            return p == q ? 0 : double.PositiveInfinity;
        }

        // E_p[ln p − ln q]: both logarithms are quadratics, so first and second moments do.
        double mean = p.Moment(1, 0, double.NegativeInfinity, double.PositiveInfinity);
        double own = p.Moment(2, p.Mean, double.NegativeInfinity, double.PositiveInfinity);
        double others = p.Moment(2, q.Mean, double.NegativeInfinity, double.PositiveInfinity);
        return p.Low < q.Low || p.High > q.High
            ? double.PositiveInfinity
            : (others / (2 * q.Deviation * q.Deviation)) - (own / (2 * p.Deviation * p.Deviation))
                + (p.LogDensityAt(Inside(p, mean)) + Square(Inside(p, mean), p)) - (q.LogDensityAt(Inside(p, mean)) + Square(Inside(p, mean), q));
    }

    private static double Inside(Gaussian leaf, double x) => Math.Clamp(x, leaf.Low, leaf.High);

    private static double Square(double x, Gaussian leaf) => (x - leaf.Mean) * (x - leaf.Mean) / (2 * leaf.Deviation * leaf.Deviation);
}
