using Evenhand.Circuits.Structure;

namespace Evenhand.Circuits.Queries;

/// <summary>One factor a variable, or none: what a circuit is asked under. Immutable.</summary>
public sealed class Factors
{
    private readonly Factor?[] _factors;

    private Factors(Factor?[] factors) => _factors = factors;

    /// <summary>Nothing known, nothing asked.</summary>
    public static Factors None(Circuit circuit)
    {
        ArgumentNullException.ThrowIfNull(circuit);
        return new Factors(new Factor?[circuit.Variables.Count]);
    }

    /// <summary>These and one more; both count where the variable has one already.</summary>
    public Factors With(int variable, Factor factor)
    {
        Factor?[] factors = [.. _factors];
        factors[variable] = factors[variable]?.And(factor) ?? factor;
        return new Factors(factors);
    }

    /// <summary>These without the factor of a variable.</summary>
    public Factors Without(int variable)
    {
        Factor?[] factors = [.. _factors];
        factors[variable] = null;
        return new Factors(factors);
    }

    /// <summary>The factor of a variable, or null.</summary>
    public Factor? this[int variable] => _factors[variable];
}
