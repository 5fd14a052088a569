using System.Runtime.Intrinsics;

namespace Evenhand.Circuits.Profiles;

/// <summary>Fused multiply and add on vectors of one element type; the hot loops are written once for float and double.</summary>
/// <typeparam name="T">The element.</typeparam>
internal interface IVectorArithmetic<T>
{
    /// <summary>a · b + c.</summary>
    static abstract Vector512<T> MultiplyAdd(Vector512<T> a, Vector512<T> b, Vector512<T> c);

    /// <summary>a · b + c.</summary>
    static abstract Vector256<T> MultiplyAdd(Vector256<T> a, Vector256<T> b, Vector256<T> c);
}

/// <summary>Vectors of float.</summary>
internal readonly struct FloatArithmetic : IVectorArithmetic<float>
{
    /// <inheritdoc/>
    public static Vector512<float> MultiplyAdd(Vector512<float> a, Vector512<float> b, Vector512<float> c) => Vector512.FusedMultiplyAdd(a, b, c);

    /// <inheritdoc/>
    public static Vector256<float> MultiplyAdd(Vector256<float> a, Vector256<float> b, Vector256<float> c) => Vector256.FusedMultiplyAdd(a, b, c);
}

/// <summary>Vectors of double.</summary>
internal readonly struct DoubleArithmetic : IVectorArithmetic<double>
{
    /// <inheritdoc/>
    public static Vector512<double> MultiplyAdd(Vector512<double> a, Vector512<double> b, Vector512<double> c) => Vector512.FusedMultiplyAdd(a, b, c);

    /// <inheritdoc/>
    public static Vector256<double> MultiplyAdd(Vector256<double> a, Vector256<double> b, Vector256<double> c) => Vector256.FusedMultiplyAdd(a, b, c);
}
