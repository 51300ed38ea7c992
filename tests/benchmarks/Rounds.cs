using System.Diagnostics;

namespace BenchRunner.Benchmarks;

/// <summary>Times works in interleaved rounds, by the processor time of this process: a neighbour's work is not
/// ours.</summary>
internal static class Rounds
{
    private const int Count = 7;
    private const double RoundSeconds = 0.2;

    /// <summary>Median processor seconds a call of each work, and the relative half distance of its
    /// quartiles.</summary>
    public static (double Median, double Spread)[] Time(params Action[] works)
    {
        int[] calls = [.. works.Select(Calls)];
        double[][] seconds = [.. works.Select(_ => new double[Count])];
        for (int round = 0; round < Count; round++)
        {
            for (int i = 0; i < works.Length; i++)
            {
                TimeSpan start = Environment.CpuUsage.TotalTime;
                for (int call = 0; call < calls[i]; call++)
                {
                    works[i]();
                }

                seconds[i][round] = (Environment.CpuUsage.TotalTime - start).TotalSeconds / calls[i];
            }
        }

        return [.. seconds.Select(Summary)];
    }

    /// <summary>Warms a work up, and says how often it fits into a round.</summary>
    private static int Calls(Action work)
    {
        long start = Stopwatch.GetTimestamp();
        int calls = 0;
        do
        {
            work();
            calls++;
        }
        while (Stopwatch.GetElapsedTime(start).TotalSeconds < RoundSeconds);
        return calls;
    }

    private static (double Median, double Spread) Summary(double[] seconds)
    {
        Array.Sort(seconds);
        double median = seconds[Count / 2];
        return (median, (seconds[Count * 3 / 4] - seconds[Count / 4]) / (2 * median));
    }
}
