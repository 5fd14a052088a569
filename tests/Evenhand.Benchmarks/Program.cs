namespace Evenhand.Benchmarks;

internal static class Program
{
    private static int Main(string[] args)
    {
        switch (args.FirstOrDefault())
        {
            case "decode":
                DecodeBenchmark.Run(Records(args));
                return 0;
            case "circuit":
                CircuitBenchmark.Run();
                return 0;
            case "density":
                DensityBenchmark.Run(args.Length > 1 ? Records(args) : 16);
                return 0;
            case "replay":
                ReplayBenchmark.Run(Records(args));
                return 0;
            case "snapshot":
                SnapshotBenchmark.Run(args.Length > 1 ? Records(args) : 1_000);
                return 0;
            case "tick":
                TickBenchmark.Run();
                return 0;
            default:
                Console.Error.WriteLine("usage: circuit | decode [RECORDS] | density [PROFILES] | replay [RECORDS] | snapshot [RECORDS] | tick");
                return 2;
        }
    }

    private static int Records(string[] args) =>
        args.Length > 1 ? int.Parse(args[1], System.Globalization.CultureInfo.InvariantCulture) : 1_000_000;
}
