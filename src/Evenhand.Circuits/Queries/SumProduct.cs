using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Queries;

/// <summary>Sums and products of leaves times factors: probabilities under evidence, and expectations of products of factors.</summary>
/// <param name="factors">The factors.</param>
public readonly struct SumProduct(Factors factors) : ICircuitAlgebra<Scaled>
{
    /// <inheritdoc/>
    public Scaled Leaf(Circuit circuit, int node)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        if (factors[circuit.VariableOf(node)] is { } factor)
        {
            return factor.Of(circuit, node);
        }

        if (circuit.KindOf(node) == NodeKind.Gaussian)
        {
            return Scaled.One;
        }

        double sum = 0;
        foreach (double p in circuit.ParametersOf(node))
        {
            sum += p;
        }

        return Scaled.Of(sum);
    }

    /// <inheritdoc/>
    public Scaled Multiply(Scaled left, Scaled right) => left * right;

    /// <inheritdoc/>
    public Scaled Weigh(double weight, Scaled part) => weight * part;

    /// <inheritdoc/>
    public Scaled Add(Scaled left, Scaled right) => left + right;
}
