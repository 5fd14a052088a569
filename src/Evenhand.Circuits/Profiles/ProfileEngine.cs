using System.Numerics;
using System.Runtime.CompilerServices;
using System.Runtime.InteropServices;
using System.Runtime.Intrinsics;

namespace Evenhand.Circuits.Profiles;

/// <summary>A profile circuit made ready for blocks of records: likelihoods by one pass up, posteriors and flows by one down.</summary>
/// <remarks>
/// <para>Scaled linear domain (L. R. Rabiner, Proceedings of the IEEE 77 (1989) 257–286, section V.A): a record's numbers at a field are
/// divided by their sum once enough fields have been multiplied, and the divisors are kept apart. Rows are padded to whole vectors with
/// zeros. No allocation after construction; the results of a record do not depend on the block that it is in.</para>
/// </remarks>
/// <typeparam name="T">float or double.</typeparam>
/// <typeparam name="TArithmetic">Its vectors.</typeparam>
internal sealed class ProfileEngine<T, TArithmetic>
    where T : unmanaged, IFloatingPointIeee754<T>
    where TArithmetic : struct, IVectorArithmetic<T>
{
    private const double SmallScale = 1e-200;

    private readonly ProfileShape _shape;
    private readonly int _width;
    private readonly int[] _inner;
    private readonly int[][] _leaves;
    private readonly int[][] _innerChildren;
    private readonly bool[] _scales;

    // Rows by child's state for the way up, by parent's state for the way down.
    private readonly T[][] _up;
    private readonly T[][] _down;
    private readonly T[][] _emissions;
    private readonly T[] _evidence;

    public ProfileEngine(ProfileShape shape, ProfileParameters parameters)
    {
        _shape = shape;
        int lanes = LatentKernel<T, TArithmetic>.Lanes;
        _width = (shape.Profiles + lanes - 1) / lanes * lanes;
        _inner = [.. shape.Inner];
        _leaves = [.. shape.Leaves];
        _innerChildren = [.. shape.Fields.Select((_, f) => _inner.Where(i => shape.Parents[i] == f).ToArray())];
        _scales = WhereToScale(typeof(T) == typeof(float) ? 7 : 48);
        _up = [.. shape.Fields.Select((_, f) => parameters.Transitions[f].Length == 0 ? [] : new T[_width * _width])];
        _down = [.. _up.Select(rows => new T[rows.Length])];
        _emissions = [.. shape.Fields.Select(f => new T[(f.StateCount + 1) * _width])];
        _evidence = new T[shape.EvidenceCount * _width];
        Set(parameters);
    }

    /// <summary>Numbers a row.</summary>
    public int Width => _width;

    /// <summary>Room for a block of records.</summary>
    public ProfileBlock<T> NewBlock(int capacity)
    {
        int tile = LatentKernel<T, TArithmetic>.Tile;
        return new ProfileBlock<T>(_shape, (capacity + tile - 1) / tile * tile, _width);
    }

    /// <summary>Room for flows.</summary>
    public ProfileFlows<T> NewFlows() => new(_shape, _width);

    /// <summary>Takes other parameters.</summary>
    public void Set(ProfileParameters parameters)
    {
        int k = _shape.Profiles;
        foreach (int field in _inner)
        {
            double[] a = parameters.Transitions[field];
            for (int j = 0; a.Length > 0 && j < _width; j++)
            {
                for (int i = 0; i < k; i++)
                {
                    // A padded parent state takes any row: it has no mass, but its message must not be zero.
                    T value = T.CreateChecked(a[((j < k ? j : 0) * k) + i]);
                    _up[field][(i * _width) + j] = value;
                    _down[field][(j * _width) + i] = value;
                }
            }
        }

        for (int f = 0; f < _shape.Fields.Count; f++)
        {
            double[] e = parameters.Emissions[f];
            for (int row = 0; row <= _shape.Fields[f].StateCount; row++)
            {
                for (int i = 0; i < k; i++)
                {
                    _emissions[f][(row * _width) + i] = row < _shape.Fields[f].StateCount ? T.CreateChecked(e[(row * k) + i]) : T.One;
                }
            }
        }

        SetEvidence(parameters);
    }

    /// <summary>The log-likelihoods of a block's records.</summary>
    public void Up(ProfileBlock<T> block)
    {
        int padded = Pad(block);
        Array.Fill(block.Scale, 1.0, 0, padded);
        Array.Clear(block.LogScale, 0, padded);
        foreach (int field in _inner)
        {
            UpField(block, field, padded);
        }

        Root(block, padded);
    }

    /// <summary>Posteriors of all hidden states after <see cref="Up"/>, and their flows.</summary>
    public void Down(ProfileBlock<T> block, ProfileFlows<T>? flows)
    {
        int padded = Pad(block);
        for (int n = _inner.Length - 1; n >= 0; n--)
        {
            int field = _inner[n];
            if (field != _shape.Root)
            {
                DownField(block, field, padded, flows);
            }

            if (flows is not null)
            {
                AddEmissions(block, field, flows);
            }
        }

        if (flows is not null)
        {
            AddRoot(block, flows);
        }
    }

    /// <summary>P(evidence, profile) for each kind of evidence: cells that it allows, times its pattern of known labels.</summary>
    private void SetEvidence(ProfileParameters parameters)
    {
        int k = _shape.Profiles;
        for (int evidence = 0; evidence < _shape.EvidenceCount; evidence++)
        {
            int pattern = _shape.KnownLabelsOf(evidence);
            for (int z = 0; z < k; z++)
            {
                double sum = 0;
                foreach (int cell in _shape.CellsOf(evidence))
                {
                    sum += parameters.Cells[cell] * parameters.Weights[(cell * k) + z]
                        * parameters.Patterns[(((_shape.DecisionOf(cell) * k) + z) * _shape.PatternCount) + pattern];
                }

                _evidence[(evidence * _width) + z] = T.CreateChecked(sum);
            }
        }
    }

    /// <summary>The inner fields at which numbers are divided by their sum: where so many fields have been multiplied since.</summary>
    private bool[] WhereToScale(int most)
    {
        bool[] scales = new bool[_shape.Fields.Count];
        int[] since = new int[_shape.Fields.Count];
        foreach (int field in _inner)
        {
            since[field] = 1 + _leaves[field].Length + _innerChildren[field].Sum(c => since[c]);
            if (since[field] >= most && field != _shape.Root)
            {
                scales[field] = true;
                since[field] = 0;
            }
        }

        return scales;
    }

    /// <summary>Fills the block up to whole tiles with records of which nothing is known.</summary>
    private int Pad(ProfileBlock<T> block)
    {
        int tile = LatentKernel<T, TArithmetic>.Tile;
        int padded = (block.Count + tile - 1) / tile * tile;
        for (int e = block.Count; e < padded; e++)
        {
            for (int f = 0; f < _shape.Fields.Count; f++)
            {
                block.Codes[f][e] = (ushort)_shape.Fields[f].StateCount;
            }

            block.Evidence[e] = _shape.EvidenceCount - 1;
        }

        return padded;
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private void UpField(ProfileBlock<T> block, int field, int padded)
    {
        T[] up = block.Up[field];
        TakeRows(block.Codes[field], _emissions[field], up, padded);
        foreach (int leaf in _leaves[field])
        {
            MultiplyRows(block.Codes[leaf], _emissions[leaf], up, padded);
        }

        foreach (int child in _innerChildren[field])
        {
            MultiplyAll(block.Message[child], up, padded * _width);
        }

        if (_scales[field])
        {
            Rescale(block, up, padded);
        }

        if (field != _shape.Root)
        {
            LatentKernel<T, TArithmetic>.Multiply(up, _up[field], block.Message[field], padded, _width);
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private void TakeRows(ushort[] codes, T[] rows, T[] into, int records)
    {
        ref T from = ref MemoryMarshal.GetArrayDataReference(rows);
        ref T to = ref MemoryMarshal.GetArrayDataReference(into);
        unchecked
        {
            int width = _width;
            for (int e = 0; e < records; e++)
            {
                ref T row = ref Unsafe.Add(ref from, codes[e] * width);
                Vector512.LoadUnsafe(ref row).StoreUnsafe(ref to);
                for (int i = Vector512<T>.Count; i < width; i += Vector512<T>.Count)
                {
                    Vector512.LoadUnsafe(ref row, (nuint)i).StoreUnsafe(ref to, (nuint)i);
                }

                to = ref Unsafe.Add(ref to, width);
            }
        }
    }

    [MethodImpl(MethodImplOptions.AggressiveOptimization)]
    private void MultiplyRows(ushort[] codes, T[] rows, T[] into, int records)
    {
        ref T from = ref MemoryMarshal.GetArrayDataReference(rows);
        ref T to = ref MemoryMarshal.GetArrayDataReference(into);
        unchecked
        {
            int width = _width;
            for (int e = 0; e < records; e++)
            {
                ref T row = ref Unsafe.Add(ref from, codes[e] * width);
                (Vector512.LoadUnsafe(ref row) * Vector512.LoadUnsafe(ref to)).StoreUnsafe(ref to);
                for (int i = Vector512<T>.Count; i < width; i += Vector512<T>.Count)
                {
                    (Vector512.LoadUnsafe(ref row, (nuint)i) * Vector512.LoadUnsafe(ref to, (nuint)i)).StoreUnsafe(ref to, (nuint)i);
                }

                to = ref Unsafe.Add(ref to, width);
            }
        }
    }

    private static void MultiplyAll(T[] factors, T[] into, int count)
    {
        ref T from = ref MemoryMarshal.GetArrayDataReference(factors);
        ref T to = ref MemoryMarshal.GetArrayDataReference(into);
        for (nuint i = 0; i < (nuint)count; i += (nuint)Vector512<T>.Count)
        {
            (Vector512.LoadUnsafe(ref from, i) * Vector512.LoadUnsafe(ref to, i)).StoreUnsafe(ref to, i);
        }
    }

    private void Rescale(ProfileBlock<T> block, T[] up, int records)
    {
        for (int e = 0; e < records; e++)
        {
            Span<T> row = up.AsSpan(e * _width, _width);
            T sum = Sum(row);
            if (sum > T.Zero)
            {
                Scale(row, T.One / sum);
                block.Scale[e] *= double.CreateChecked(sum);
            }

            if (block.Scale[e] < SmallScale)
            {
                block.LogScale[e] += Math.Log(block.Scale[e]);
                block.Scale[e] = 1;
            }
        }
    }

    /// <summary>Likelihoods, and posteriors of the root's hidden state.</summary>
    private void Root(ProfileBlock<T> block, int records)
    {
        T[] up = block.Up[_shape.Root], posterior = block.Down[_shape.Root];
        for (int e = 0; e < records; e++)
        {
            ReadOnlySpan<T> prior = _evidence.AsSpan(block.Evidence[e] * _width, _width);
            Span<T> own = posterior.AsSpan(e * _width, _width);
            up.AsSpan(e * _width, _width).CopyTo(own);
            ref T a = ref MemoryMarshal.GetReference(prior);
            ref T b = ref MemoryMarshal.GetReference(own);
            for (nuint i = 0; i < (nuint)_width; i += (nuint)Vector512<T>.Count)
            {
                (Vector512.LoadUnsafe(ref a, i) * Vector512.LoadUnsafe(ref b, i)).StoreUnsafe(ref b, i);
            }

            T sum = Sum(own);
            block.LogLikelihood[e] = sum > T.Zero ? Math.Log(double.CreateChecked(sum) * block.Scale[e]) + block.LogScale[e] : double.NegativeInfinity;
            Scale(own, sum > T.Zero ? T.One / sum : T.Zero);
        }
    }

    private void DownField(ProfileBlock<T> block, int field, int padded, ProfileFlows<T>? flows)
    {
        T[] ratio = block.Ratio, down = block.Down[field], up = block.Up[field];
        Divide(block.Down[_shape.Parents[field]], block.Message[field], ratio, padded * _width);
        LatentKernel<T, TArithmetic>.Multiply(ratio, _down[field], down, padded, _width);
        MultiplyAll(up, down, padded * _width);
        if (flows is not null)
        {
            LatentKernel<T, TArithmetic>.AddOuter(ratio, up, flows.Outer[field], block.Count, _width);
        }
    }

    /// <summary>Posterior over message; 0 where the message is 0, which only impossible records have.</summary>
    private static void Divide(T[] above, T[] below, T[] into, int count)
    {
        ref T x = ref MemoryMarshal.GetArrayDataReference(above);
        ref T y = ref MemoryMarshal.GetArrayDataReference(below);
        ref T r = ref MemoryMarshal.GetArrayDataReference(into);
        for (nuint i = 0; i < (nuint)count; i += (nuint)Vector512<T>.Count)
        {
            Vector512<T> message = Vector512.LoadUnsafe(ref y, i);
            Vector512<T> quotient = Vector512.LoadUnsafe(ref x, i) / message;
            Vector512.ConditionalSelect(Vector512.Equals(message, Vector512<T>.Zero), Vector512<T>.Zero, quotient).StoreUnsafe(ref r, i);
        }
    }

    private void AddEmissions(ProfileBlock<T> block, int field, ProfileFlows<T> flows)
    {
        AddRows(block, field, block.Down[field], flows);
        foreach (int leaf in _leaves[field])
        {
            AddRows(block, leaf, block.Down[field], flows);
        }
    }

    private void AddRows(ProfileBlock<T> block, int field, T[] posterior, ProfileFlows<T> flows)
    {
        ushort[] codes = block.Codes[field];
        ref T from = ref MemoryMarshal.GetArrayDataReference(posterior);
        ref T to = ref MemoryMarshal.GetArrayDataReference(flows.Emissions[field]);
        unchecked
        {
            int width = _width, records = block.Count;
            for (int e = 0; e < records; e++)
            {
                ref T row = ref Unsafe.Add(ref to, codes[e] * width);
                (Vector512.LoadUnsafe(ref row) + Vector512.LoadUnsafe(ref from)).StoreUnsafe(ref row);
                for (int i = Vector512<T>.Count; i < width; i += Vector512<T>.Count)
                {
                    (Vector512.LoadUnsafe(ref row, (nuint)i) + Vector512.LoadUnsafe(ref from, (nuint)i)).StoreUnsafe(ref row, (nuint)i);
                }

                from = ref Unsafe.Add(ref from, width);
            }
        }
    }

    private void AddRoot(ProfileBlock<T> block, ProfileFlows<T> flows)
    {
        T[] posterior = block.Down[_shape.Root];
        for (int e = 0; e < block.Count; e++)
        {
            Span<T> sums = flows.Evidence.AsSpan(block.Evidence[e] * _width, _width);
            for (int i = 0; i < _width; i++)
            {
                sums[i] += posterior[(e * _width) + i];
            }

            flows.LogLikelihood += block.LogLikelihood[e];
        }

        flows.Records += block.Count;
    }

    private static T Sum(ReadOnlySpan<T> row)
    {
        ref T x = ref MemoryMarshal.GetReference(row);
        Vector512<T> sum = Vector512<T>.Zero;
        for (nuint i = 0; i < (nuint)row.Length; i += (nuint)Vector512<T>.Count)
        {
            sum += Vector512.LoadUnsafe(ref x, i);
        }

        return Vector512.Sum(sum);
    }

    private static void Scale(Span<T> row, T by)
    {
        ref T x = ref MemoryMarshal.GetReference(row);
        Vector512<T> factor = Vector512.Create(by);
        for (nuint i = 0; i < (nuint)row.Length; i += (nuint)Vector512<T>.Count)
        {
            (Vector512.LoadUnsafe(ref x, i) * factor).StoreUnsafe(ref x, i);
        }
    }
}
