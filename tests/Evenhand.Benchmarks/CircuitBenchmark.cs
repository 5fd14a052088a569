using System.Diagnostics;
using System.Globalization;
using System.Runtime.CompilerServices;
using System.Runtime.Intrinsics;
using Evenhand.Circuits.Profiles;
using Evenhand.Circuits.Structure;

namespace Evenhand.Benchmarks;

/// <summary>Passes over profile circuits of random trees, 3 % of values missing, blocks of 64; beside the core's rate of fused multiply-adds in the same run.</summary>
internal static class CircuitBenchmark
{
    private const int Block = 64;
    private const int PeakRounds = 1000;

    private static float s_sink;

    public static void Run()
    {
        double peak = PeakRounds * 10.0 * 2 * Vector512<float>.Count / Nanoseconds(Peak);
        Console.WriteLine(string.Create(CultureInfo.InvariantCulture, $"peak, float, {(Vector512.IsHardwareAccelerated ? 512 : 256)} bits: {peak:0} GFLOP/s"));
        foreach (int k in (int[])[16, 32, 64])
        {
            float[] u = Filled(Block * k), a = Filled(k * k), m = new float[Block * k], counts = new float[k * k];
            double multiply = Nanoseconds(() => LatentKernel<float, FloatArithmetic>.Multiply(u, a, m, Block, k)) / Block;
            double outer = Nanoseconds(() => LatentKernel<float, FloatArithmetic>.AddOuter(u, m, counts, Block, k)) / Block;
            double work = 2.0 * k * k;
            Console.WriteLine(string.Create(
                CultureInfo.InvariantCulture,
                $"K = {k}: multiply {multiply:0.0} ns a record ({work / multiply / peak:0.00} of peak), counts {outer:0.0} ns ({work / outer / peak:0.00})"));
        }

        foreach ((int fields, int k) in ((int, int)[])[(20, 16), (20, 32), (20, 64), (50, 16), (100, 16)])
        {
            Pass<float, FloatArithmetic>(fields, k, "float");
        }

        Pass<double, DoubleArithmetic>(20, 16, "double");
    }

    private static void Pass<T, TArithmetic>(int fields, int k, string type)
        where T : unmanaged, System.Numerics.IFloatingPointIeee754<T>
        where TArithmetic : struct, IVectorArithmetic<T>
    {
        Random random = new(1);
        Variable[] inputs = [.. Enumerable.Range(0, fields).Select(f => Variable.Category($"x{f}", Enumerable.Range(0, 4 + random.Next(8)).Select(s => $"{s}")))];
        int[] parents = [.. Enumerable.Range(0, fields).Select(f => f == 0 ? -1 : random.Next(f))];
        ProfileShape shape = new(k, [Variable.Category("g", ["a", "b", "c"])], Variable.Category("decision", ["favourable", "unfavourable"]), inputs, parents);
        ProfileParameters p = ProfileParameters.Zero(shape);
        foreach (double[] array in (double[][])[p.Cells, p.Weights, p.Patterns, .. p.Transitions, .. p.Emissions])
        {
            for (int i = 0; i < array.Length; i++)
            {
                array[i] = (0.5 + random.NextDouble()) / k;
            }
        }

        ProfileEngine<T, TArithmetic> engine = new(shape, p);
        ProfileBlock<T> block = engine.NewBlock(Block);
        ProfileFlows<T> flows = engine.NewFlows();
        block.Count = Block;
        for (int e = 0; e < Block; e++)
        {
            block.Evidence[e] = shape.EvidenceOf([(ushort)random.Next(4)], random.Next(2));
            for (int f = 0; f < fields; f++)
            {
                block.Codes[f][e] = (ushort)(random.Next(100) < 3 ? inputs[f].StateCount : random.Next(inputs[f].StateCount));
            }
        }

        double up = Nanoseconds(() => engine.Up(block)) / Block;
        double both = Nanoseconds(() =>
        {
            engine.Up(block);
            engine.Down(block, flows);
        }) / Block;
        Console.WriteLine(string.Create(
            CultureInfo.InvariantCulture,
            $"{fields} fields, {k} profiles, {type}, {shape.Inner.Count - 1} dense edges: up {up:0} ns a record, up and down with flows {both:0} ns"));
    }

    private static float[] Filled(int count) => [.. Enumerable.Range(0, count).Select(i => 0.5f / (1 + (i % 7)))];

    /// <summary>The best of many short runs: what the core can do when nothing disturbs it.</summary>
    private static double Nanoseconds(Action run)
    {
        // Long enough for the hot code to be compiled for good.
        for (long start = Stopwatch.GetTimestamp(); Stopwatch.GetElapsedTime(start).TotalMilliseconds < 600;)
        {
            run();
        }

        double best = double.PositiveInfinity;
        for (int trial = 0; trial < 200; trial++)
        {
            long start = Stopwatch.GetTimestamp();
            for (int i = 0; i < 50; i++)
            {
                run();
            }

            best = Math.Min(best, Stopwatch.GetElapsedTime(start).TotalNanoseconds / 50);
        }

        return best;
    }

    [MethodImpl(MethodImplOptions.NoInlining)]
    private static void Peak()
    {
        Vector512<float> a = Vector512.Create(0.999f), b = Vector512.Create(1e-6f);
        Vector512<float> s0 = a, s1 = a, s2 = a, s3 = a, s4 = a, s5 = a, s6 = a, s7 = a, s8 = a, s9 = a;
        for (int i = 0; i < PeakRounds; i++)
        {
            s0 = Vector512.FusedMultiplyAdd(s0, a, b);
            s1 = Vector512.FusedMultiplyAdd(s1, a, b);
            s2 = Vector512.FusedMultiplyAdd(s2, a, b);
            s3 = Vector512.FusedMultiplyAdd(s3, a, b);
            s4 = Vector512.FusedMultiplyAdd(s4, a, b);
            s5 = Vector512.FusedMultiplyAdd(s5, a, b);
            s6 = Vector512.FusedMultiplyAdd(s6, a, b);
            s7 = Vector512.FusedMultiplyAdd(s7, a, b);
            s8 = Vector512.FusedMultiplyAdd(s8, a, b);
            s9 = Vector512.FusedMultiplyAdd(s9, a, b);
        }

        s_sink = Vector512.Sum(s0 + s1 + s2 + s3 + s4 + s5 + s6 + s7 + s8 + s9);
    }
}
