namespace Evenhand.Benchmarks;

internal static class Program
{
    private static void Main()
    {
    }
}
