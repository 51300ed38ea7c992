using System.Diagnostics;

namespace BenchRunner.Benchmarks;

/// <summary>Times two works in interleaved rounds by the wall clock: of a link, waiting is what costs.</summary>
internal static class WallRounds
{
    private const int Count = 9;
    private const double RoundSeconds = 0.3;

    /// <summary>Times ours and the floor beside each other, after warming both up.</summary>
    /// <param name="ours">Ours, once a call.</param>
    /// <param name="floor">The floor, once a call.</param>
    /// <returns>The median call of each, s.</returns>
    public static (Figure Ours, Figure Floor) Time(Action ours, Action floor)
    {
        int calls = Math.Max(Calls(ours), Calls(floor));
        var rounds = (Ours: new List<Spent>(), Floor: new List<Spent>());
        for (int round = 0; round < Count; round++)
        {
            rounds.Ours.Add(Round(ours, calls));
            rounds.Floor.Add(Round(floor, calls));
        }

        return (Figure.Of(rounds.Ours), Figure.Of(rounds.Floor));
    }

    /// <summary>The median call of a round.</summary>
    private static Spent Round(Action work, int calls)
    {
        double[] seconds = new double[calls];
        for (int call = 0; call < calls; call++)
        {
            long began = Stopwatch.GetTimestamp();
            work();
            seconds[call] = Stopwatch.GetElapsedTime(began).TotalSeconds;
        }

        Array.Sort(seconds);
        return new Spent(seconds[calls / 2], seconds[0]);
    }

    private static int Calls(Action work)
    {
        _ = Round(work, 3);
        return Math.Clamp((int)(RoundSeconds / Round(work, 5).Processor), 3, 5000);
    }
}
