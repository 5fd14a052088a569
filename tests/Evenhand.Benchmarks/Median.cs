using System.Diagnostics;

namespace Evenhand.Benchmarks;

/// <summary>Times pieces of work in turn, so that a machine that slows down slows all of them, and takes each one's median.</summary>
internal static class Median
{
    /// <summary>Seconds of each piece of work, the median of some rounds after one that is not counted.</summary>
    public static double[] Seconds(int rounds, params Action[] work)
    {
        double[][] times = new double[work.Length][];
        Array.ForEach(Enumerable.Range(0, work.Length).ToArray(), i => times[i] = new double[rounds]);
        for (int round = -1; round < rounds; round++)
        {
            for (int i = 0; i < work.Length; i++)
            {
                long start = Stopwatch.GetTimestamp();
                work[i]();
                if (round >= 0)
                {
                    times[i][round] = Stopwatch.GetElapsedTime(start).TotalSeconds;
                }
            }
        }

        return [.. times.Select(t => t.Order().ElementAt(rounds / 2))];
    }
}
