namespace Evenhand.Testing;

/// <summary>How far a value may lie from its reference.</summary>
/// <param name="Absolute">Absolute distance allowed.</param>
/// <param name="Relative">Distance allowed as a share of the reference.</param>
public readonly record struct Tolerance(double Absolute, double Relative)
{
    /// <summary>True when |got − expected| ≤ max(abs, rel · |expected|); infinities must be equal, NaN never passes.</summary>
    public bool Accepts(double got, double expected) =>
        got == expected || Math.Abs(got - expected) <= Math.Max(Absolute, Relative * Math.Abs(expected));

    /// <summary>As <see cref="Accepts"/>, but for p-values: only the relative part, where there is one.</summary>
    public bool AcceptsTail(double got, double expected) =>
        Relative > 0 ? Math.Abs(got - expected) <= Relative * expected : Accepts(got, expected);
}
