using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Queries;

/// <summary>The largest term instead of the sum: the probability (or density) of the likeliest completion of a deterministic circuit.</summary>
/// <param name="factors">Evidence.</param>
internal readonly struct MaxProduct(Factors factors) : ICircuitAlgebra<Scaled>
{
    /// <inheritdoc/>
    public Scaled Leaf(Circuit circuit, int node) => Best(circuit, node, factors).Value;

    /// <inheritdoc/>
    public Scaled Multiply(Scaled left, Scaled right) => left * right;

    /// <inheritdoc/>
    public Scaled Weigh(double weight, Scaled part) => weight * part;

    /// <inheritdoc/>
    public Scaled Add(Scaled left, Scaled right) => right.IsAbove(left) ? right : left;

    /// <summary>The likeliest state or number of a leaf under evidence.</summary>
    public static (double Answer, Scaled Value) Best(Circuit circuit, int leaf, Factors factors)
    {
        Factor? factor = factors[circuit.VariableOf(leaf)];
        ReadOnlySpan<double> p = circuit.ParametersOf(leaf);
        if (circuit.KindOf(leaf) == NodeKind.Gaussian)
        {
            return Mode(Gaussian.Of(p), factor);
        }

        int best = 0;
        double most = -1;
        for (int s = 0; s < p.Length; s++)
        {
            double value = p[s] * (factor?.AtState(s) ?? 1);
            (best, most) = value > most ? (s, value) : (best, most);
        }

        return (best, Scaled.Of(most));
    }

    private static (double Answer, Scaled Value) Mode(Gaussian leaf, Factor? factor)
    {
        Gaussian given = factor?.Given(leaf) ?? leaf;
        double x = Math.Clamp(given.Mean, given.Low, given.High);
        return (x, factor is null || !given.IsPoint ? Scaled.Of(leaf.DensityAt(x)) : Factor.At(x).OfGaussian(leaf));
    }
}
