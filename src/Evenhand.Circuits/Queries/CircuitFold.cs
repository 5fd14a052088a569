using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Queries;

/// <summary>The two traversals that every query is made of: up with an algebra, and down with derivatives.</summary>
public static class CircuitFold
{
    /// <summary>What each node comes to, children before parents; in time linear in the edges.</summary>
    public static T[] Up<T, TAlgebra>(Circuit circuit, TAlgebra algebra)
        where TAlgebra : ICircuitAlgebra<T>
    {
        ArgumentNullException.ThrowIfNull(circuit);
        T[] values = new T[circuit.NodeCount];
        for (int node = 0; node < values.Length; node++)
        {
            values[node] = circuit.KindOf(node) switch
            {
                NodeKind.Product => Product(values, circuit.ChildrenOf(node), algebra),
                NodeKind.Sum => Sum(values, circuit.ChildrenOf(node), circuit.WeightsOf(node), algebra),
                _ => algebra.Leaf(circuit, node),
            };
        }

        return values;
    }

    /// <summary>The derivative of the root's value by each node's value (Darwiche 2003), parents before children.</summary>
    /// <param name="circuit">The circuit.</param>
    /// <param name="values">What <see cref="Up"/> gave with <see cref="SumProduct"/>.</param>
    /// <remarks>No division: a part may be nothing.</remarks>
    public static Scaled[] Down(Circuit circuit, Scaled[] values)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        ArgumentNullException.ThrowIfNull(values);
        Scaled[] derivatives = new Scaled[circuit.NodeCount];
        derivatives[circuit.Root] = Scaled.One;
        for (int node = circuit.Root; node >= 0; node--)
        {
            ReadOnlySpan<int> children = circuit.ChildrenOf(node);
            if (derivatives[node].IsZero)
            {
                continue;
            }

            if (circuit.KindOf(node) == NodeKind.Sum)
            {
                ReadOnlySpan<double> weights = circuit.WeightsOf(node);
                for (int i = 0; i < children.Length; i++)
                {
                    derivatives[children[i]] += weights[i] * derivatives[node];
                }
            }
            else if (circuit.KindOf(node) == NodeKind.Product)
            {
                DownProduct(children, values, derivatives, derivatives[node]);
            }
        }

        return derivatives;
    }

    private static T Product<T, TAlgebra>(T[] values, ReadOnlySpan<int> children, TAlgebra algebra)
        where TAlgebra : ICircuitAlgebra<T>
    {
        T product = values[children[0]];
        for (int i = 1; i < children.Length; i++)
        {
            product = algebra.Multiply(product, values[children[i]]);
        }

        return product;
    }

    private static T Sum<T, TAlgebra>(T[] values, ReadOnlySpan<int> children, ReadOnlySpan<double> weights, TAlgebra algebra)
        where TAlgebra : ICircuitAlgebra<T>
    {
        T sum = algebra.Weigh(weights[0], values[children[0]]);
        for (int i = 1; i < children.Length; i++)
        {
            sum = algebra.Add(sum, algebra.Weigh(weights[i], values[children[i]]));
        }

        return sum;
    }

    /// <summary>Each part takes the derivative times all the others: those after it first, then those before it on the way.</summary>
    private static void DownProduct(ReadOnlySpan<int> children, Scaled[] values, Scaled[] derivatives, Scaled own)
    {
        Scaled[] after = new Scaled[children.Length + 1];
        after[children.Length] = Scaled.One;
        for (int i = children.Length - 1; i > 0; i--)
        {
            after[i] = values[children[i]] * after[i + 1];
        }

        Scaled before = own;
        for (int i = 0; i < children.Length; i++)
        {
            derivatives[children[i]] += before * after[i + 1];
            before *= values[children[i]];
        }
    }
}
