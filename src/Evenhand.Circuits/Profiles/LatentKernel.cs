using System.Numerics;
using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;

namespace Evenhand.Circuits.Profiles;

/// <summary>The dense steps of a hidden tree on blocks of records, event-major: the K numbers of a record stand side by side.</summary>
/// <remarks>
/// Eight records share each row of the matrix in registers, so a step of K × K runs near the core's rate of fused multiply-adds. Each
/// record's numbers are computed apart from the others', so results do not depend on how records are put into blocks.
/// </remarks>
/// <typeparam name="T">float or double.</typeparam>
/// <typeparam name="TArithmetic">Its vectors.</typeparam>
internal static class LatentKernel<T, TArithmetic>
    where T : unmanaged, IFloatingPointIeee754<T>
    where TArithmetic : struct, IVectorArithmetic<T>
{
    /// <summary>Records that are computed side by side; blocks are padded to a multiple.</summary>
    public const int Tile = 8;

    /// <summary>Numbers that K is padded to a multiple of: one vector of 512 bits.</summary>
    public static int Lanes => Vector512<T>.Count;

    /// <summary>into[e, j] = Σ_k from[e, k] · rows[k, j] for all records of a block.</summary>
    /// <param name="from">K numbers a record.</param>
    /// <param name="rows">K rows of K numbers.</param>
    /// <param name="into">K numbers a record.</param>
    /// <param name="records">A multiple of <see cref="Tile"/>.</param>
    /// <param name="k">A multiple of <see cref="Lanes"/>.</param>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public static void Multiply(ReadOnlySpan<T> from, ReadOnlySpan<T> rows, Span<T> into, int records, int k)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(from.Length, records * k);
        ArgumentOutOfRangeException.ThrowIfLessThan(into.Length, records * k);
        ArgumentOutOfRangeException.ThrowIfLessThan(rows.Length, k * k);
        ref T u = ref MemoryMarshal.GetReference(from);
        ref T a = ref MemoryMarshal.GetReference(rows);
        ref T m = ref MemoryMarshal.GetReference(into);
        unchecked
        {
            for (int e = 0; e < records; e += Tile)
            {
                if (Vector512.IsHardwareAccelerated)
                {
                    for (int j = 0; j < k; j += Vector512<T>.Count)
                    {
                        Tile512(ref Unsafe.Add(ref u, e * k), ref Unsafe.Add(ref a, j), ref Unsafe.Add(ref m, (e * k) + j), k);
                    }
                }
                else
                {
                    for (int j = 0; j < k; j += Vector256<T>.Count)
                    {
                        Tile256(ref Unsafe.Add(ref u, e * k), ref Unsafe.Add(ref a, j), ref Unsafe.Add(ref m, (e * k) + j), k);
                    }
                }
            }
        }
    }

    /// <summary>counts[j, i] += Σ_e r[e, j] · u[e, i], record by record in order.</summary>
    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    public static void AddOuter(ReadOnlySpan<T> r, ReadOnlySpan<T> u, Span<T> counts, int records, int k)
    {
        ArgumentOutOfRangeException.ThrowIfLessThan(r.Length, records * k);
        ArgumentOutOfRangeException.ThrowIfLessThan(u.Length, records * k);
        ArgumentOutOfRangeException.ThrowIfLessThan(counts.Length, k * k);
        ref T x = ref MemoryMarshal.GetReference(r);
        ref T y = ref MemoryMarshal.GetReference(u);
        ref T n = ref MemoryMarshal.GetReference(counts);
        unchecked
        {
            for (int j = 0; j < k; j += Tile)
            {
                if (Vector512.IsHardwareAccelerated)
                {
                    for (int i = 0; i < k; i += Vector512<T>.Count)
                    {
                        Outer512(ref Unsafe.Add(ref x, j), ref Unsafe.Add(ref y, i), ref Unsafe.Add(ref n, (j * k) + i), records, k);
                    }
                }
                else
                {
                    for (int i = 0; i < k; i += Vector256<T>.Count)
                    {
                        Outer256(ref Unsafe.Add(ref x, j), ref Unsafe.Add(ref y, i), ref Unsafe.Add(ref n, (j * k) + i), records, k);
                    }
                }
            }
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static void Tile512(ref T u, ref T a, ref T m, int k)
    {
        unchecked
        {
            // One reference a record: the records' numbers are then read without computing their places anew.
            ref T u1 = ref Unsafe.Add(ref u, k), u2 = ref Unsafe.Add(ref u1, k), u3 = ref Unsafe.Add(ref u2, k), u4 = ref Unsafe.Add(ref u3, k);
            ref T u5 = ref Unsafe.Add(ref u4, k), u6 = ref Unsafe.Add(ref u5, k), u7 = ref Unsafe.Add(ref u6, k);
            Vector512<T> m0 = default, m1 = default, m2 = default, m3 = default, m4 = default, m5 = default, m6 = default, m7 = default;
            for (nint i = 0; i < k; i++)
            {
                Vector512<T> row = Vector512.LoadUnsafe(ref a);
                m0 = TArithmetic.MultiplyAdd(Vector512.Create(Unsafe.Add(ref u, i)), row, m0);
                m1 = TArithmetic.MultiplyAdd(Vector512.Create(Unsafe.Add(ref u1, i)), row, m1);
                m2 = TArithmetic.MultiplyAdd(Vector512.Create(Unsafe.Add(ref u2, i)), row, m2);
                m3 = TArithmetic.MultiplyAdd(Vector512.Create(Unsafe.Add(ref u3, i)), row, m3);
                m4 = TArithmetic.MultiplyAdd(Vector512.Create(Unsafe.Add(ref u4, i)), row, m4);
                m5 = TArithmetic.MultiplyAdd(Vector512.Create(Unsafe.Add(ref u5, i)), row, m5);
                m6 = TArithmetic.MultiplyAdd(Vector512.Create(Unsafe.Add(ref u6, i)), row, m6);
                m7 = TArithmetic.MultiplyAdd(Vector512.Create(Unsafe.Add(ref u7, i)), row, m7);
                a = ref Unsafe.Add(ref a, k);
            }

            m0.StoreUnsafe(ref m);
            m1.StoreUnsafe(ref m, (nuint)k);
            m2.StoreUnsafe(ref m, (nuint)(2 * k));
            m3.StoreUnsafe(ref m, (nuint)(3 * k));
            m4.StoreUnsafe(ref m, (nuint)(4 * k));
            m5.StoreUnsafe(ref m, (nuint)(5 * k));
            m6.StoreUnsafe(ref m, (nuint)(6 * k));
            m7.StoreUnsafe(ref m, (nuint)(7 * k));
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static void Outer512(ref T x, ref T y, ref T n, int records, int k)
    {
        unchecked
        {
            nuint w = (nuint)k;
            Vector512<T> n0 = Vector512.LoadUnsafe(ref n), n1 = Vector512.LoadUnsafe(ref n, w), n2 = Vector512.LoadUnsafe(ref n, 2 * w), n3 = Vector512.LoadUnsafe(ref n, 3 * w);
            Vector512<T> n4 = Vector512.LoadUnsafe(ref n, 4 * w), n5 = Vector512.LoadUnsafe(ref n, 5 * w), n6 = Vector512.LoadUnsafe(ref n, 6 * w), n7 = Vector512.LoadUnsafe(ref n, 7 * w);
            for (int e = 0; e < records; e++)
            {
                Vector512<T> row = Vector512.LoadUnsafe(ref y, (nuint)(e * k));
                ref T r = ref Unsafe.Add(ref x, e * k);
                n0 = TArithmetic.MultiplyAdd(Vector512.Create(r), row, n0);
                n1 = TArithmetic.MultiplyAdd(Vector512.Create(Unsafe.Add(ref r, 1)), row, n1);
                n2 = TArithmetic.MultiplyAdd(Vector512.Create(Unsafe.Add(ref r, 2)), row, n2);
                n3 = TArithmetic.MultiplyAdd(Vector512.Create(Unsafe.Add(ref r, 3)), row, n3);
                n4 = TArithmetic.MultiplyAdd(Vector512.Create(Unsafe.Add(ref r, 4)), row, n4);
                n5 = TArithmetic.MultiplyAdd(Vector512.Create(Unsafe.Add(ref r, 5)), row, n5);
                n6 = TArithmetic.MultiplyAdd(Vector512.Create(Unsafe.Add(ref r, 6)), row, n6);
                n7 = TArithmetic.MultiplyAdd(Vector512.Create(Unsafe.Add(ref r, 7)), row, n7);
            }

            n0.StoreUnsafe(ref n);
            n1.StoreUnsafe(ref n, w);
            n2.StoreUnsafe(ref n, 2 * w);
            n3.StoreUnsafe(ref n, 3 * w);
            n4.StoreUnsafe(ref n, 4 * w);
            n5.StoreUnsafe(ref n, 5 * w);
            n6.StoreUnsafe(ref n, 6 * w);
            n7.StoreUnsafe(ref n, 7 * w);
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static void Tile256(ref T u, ref T a, ref T m, int k)
    {
        unchecked
        {
            // One reference a record: the records' numbers are then read without computing their places anew.
            ref T u1 = ref Unsafe.Add(ref u, k), u2 = ref Unsafe.Add(ref u1, k), u3 = ref Unsafe.Add(ref u2, k), u4 = ref Unsafe.Add(ref u3, k);
            ref T u5 = ref Unsafe.Add(ref u4, k), u6 = ref Unsafe.Add(ref u5, k), u7 = ref Unsafe.Add(ref u6, k);
            Vector256<T> m0 = default, m1 = default, m2 = default, m3 = default, m4 = default, m5 = default, m6 = default, m7 = default;
            for (nint i = 0; i < k; i++)
            {
                Vector256<T> row = Vector256.LoadUnsafe(ref a);
                m0 = TArithmetic.MultiplyAdd(Vector256.Create(Unsafe.Add(ref u, i)), row, m0);
                m1 = TArithmetic.MultiplyAdd(Vector256.Create(Unsafe.Add(ref u1, i)), row, m1);
                m2 = TArithmetic.MultiplyAdd(Vector256.Create(Unsafe.Add(ref u2, i)), row, m2);
                m3 = TArithmetic.MultiplyAdd(Vector256.Create(Unsafe.Add(ref u3, i)), row, m3);
                m4 = TArithmetic.MultiplyAdd(Vector256.Create(Unsafe.Add(ref u4, i)), row, m4);
                m5 = TArithmetic.MultiplyAdd(Vector256.Create(Unsafe.Add(ref u5, i)), row, m5);
                m6 = TArithmetic.MultiplyAdd(Vector256.Create(Unsafe.Add(ref u6, i)), row, m6);
                m7 = TArithmetic.MultiplyAdd(Vector256.Create(Unsafe.Add(ref u7, i)), row, m7);
                a = ref Unsafe.Add(ref a, k);
            }

            m0.StoreUnsafe(ref m);
            m1.StoreUnsafe(ref m, (nuint)k);
            m2.StoreUnsafe(ref m, (nuint)(2 * k));
            m3.StoreUnsafe(ref m, (nuint)(3 * k));
            m4.StoreUnsafe(ref m, (nuint)(4 * k));
            m5.StoreUnsafe(ref m, (nuint)(5 * k));
            m6.StoreUnsafe(ref m, (nuint)(6 * k));
            m7.StoreUnsafe(ref m, (nuint)(7 * k));
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveInlining)]
    private static void Outer256(ref T x, ref T y, ref T n, int records, int k)
    {
        unchecked
        {
            nuint w = (nuint)k;
            Vector256<T> n0 = Vector256.LoadUnsafe(ref n), n1 = Vector256.LoadUnsafe(ref n, w), n2 = Vector256.LoadUnsafe(ref n, 2 * w), n3 = Vector256.LoadUnsafe(ref n, 3 * w);
            Vector256<T> n4 = Vector256.LoadUnsafe(ref n, 4 * w), n5 = Vector256.LoadUnsafe(ref n, 5 * w), n6 = Vector256.LoadUnsafe(ref n, 6 * w), n7 = Vector256.LoadUnsafe(ref n, 7 * w);
            for (int e = 0; e < records; e++)
            {
                Vector256<T> row = Vector256.LoadUnsafe(ref y, (nuint)(e * k));
                ref T r = ref Unsafe.Add(ref x, e * k);
                n0 = TArithmetic.MultiplyAdd(Vector256.Create(r), row, n0);
                n1 = TArithmetic.MultiplyAdd(Vector256.Create(Unsafe.Add(ref r, 1)), row, n1);
                n2 = TArithmetic.MultiplyAdd(Vector256.Create(Unsafe.Add(ref r, 2)), row, n2);
                n3 = TArithmetic.MultiplyAdd(Vector256.Create(Unsafe.Add(ref r, 3)), row, n3);
                n4 = TArithmetic.MultiplyAdd(Vector256.Create(Unsafe.Add(ref r, 4)), row, n4);
                n5 = TArithmetic.MultiplyAdd(Vector256.Create(Unsafe.Add(ref r, 5)), row, n5);
                n6 = TArithmetic.MultiplyAdd(Vector256.Create(Unsafe.Add(ref r, 6)), row, n6);
                n7 = TArithmetic.MultiplyAdd(Vector256.Create(Unsafe.Add(ref r, 7)), row, n7);
            }

            n0.StoreUnsafe(ref n);
            n1.StoreUnsafe(ref n, w);
            n2.StoreUnsafe(ref n, 2 * w);
            n3.StoreUnsafe(ref n, 3 * w);
            n4.StoreUnsafe(ref n, 4 * w);
            n5.StoreUnsafe(ref n, 5 * w);
            n6.StoreUnsafe(ref n, 6 * w);
            n7.StoreUnsafe(ref n, 7 * w);
        }
    }
}
