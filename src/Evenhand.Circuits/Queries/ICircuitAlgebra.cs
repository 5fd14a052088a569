using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Queries;

/// <summary>What leaves, products and sums come to: a query is an algebra folded over a circuit.</summary>
/// <typeparam name="T">What a node comes to.</typeparam>
public interface ICircuitAlgebra<T>
{
    /// <summary>What a leaf comes to.</summary>
    T Leaf(Circuit circuit, int node);

    /// <summary>What two parts of a product come to together.</summary>
    T Multiply(T left, T right);

    /// <summary>What a part of a sum comes to under its weight.</summary>
    T Weigh(double weight, T part);

    /// <summary>What two parts of a sum come to together.</summary>
    T Add(T left, T right);
}
