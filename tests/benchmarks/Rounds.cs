namespace BenchRunner.Benchmarks;

/// <summary>Times works in interleaved rounds (ours, peer, ours, peer …), by the processor time of the process that
/// does them: a neighbour's work is not theirs.</summary>
internal static class Rounds
{
    private const int Count = 7;
    private const double RoundSeconds = 0.25;

    /// <summary>Does a work some times.</summary>
    /// <param name="calls">How many times.</param>
    /// <returns>What a call took.</returns>
    public delegate Spent Work(int calls);

    /// <summary>A work of this process.</summary>
    /// <param name="work">Done once a call.</param>
    public static Work Here(Action work) => calls =>
    {
        Meter meter = Meter.Start();
        for (int call = 0; call < calls; call++)
        {
            work();
            meter.Call();
        }

        return meter.Stop();
    };

    /// <summary>Times works beside each other, after warming each up.</summary>
    /// <param name="works">The works.</param>
    /// <returns>What a call of each takes.</returns>
    public static Figure[] Time(params IReadOnlyList<Work> works)
    {
        int[] calls = [.. works.Select(Calls)];
        Spent[][] spent = [.. works.Select(_ => new Spent[Count])];
        for (int round = 0; round < Count; round++)
        {
            for (int i = 0; i < works.Count; i++)
            {
                spent[i][round] = works[i](calls[i]);
            }
        }

        return [.. spent.Select(Figure.Of)];
    }

    /// <summary>Warms a work up, and says how often it fits into a round.</summary>
    private static int Calls(Work work)
    {
        for (int calls = 1; ; calls *= 2)
        {
            double spent = work(calls).Processor * calls;
            if (spent >= RoundSeconds)
            {
                return Math.Max(1, (int)(calls * RoundSeconds / spent));
            }
        }
    }
}
