namespace Evenhand.Benchmarks;

internal static class Program
{
    private static int Main(string[] args)
    {
        switch (args.FirstOrDefault())
        {
            case "replay":
                ReplayBenchmark.Run(args.Length > 1 ? int.Parse(args[1], System.Globalization.CultureInfo.InvariantCulture) : 1_000_000);
                return 0;
            case "tick":
                TickBenchmark.Run();
                return 0;
            default:
                Console.Error.WriteLine("usage: replay [RECORDS] | tick");
                return 2;
        }
    }
}
