using System.Diagnostics;

namespace BenchRunner.Benchmarks;

/// <summary>The clocks of one round of a work of this process.</summary>
internal struct Meter
{
    private TimeSpan _start;
    private long _call;
    private double _least;
    private int _calls;

    /// <summary>Starts the round.</summary>
    public static Meter Start() => new()
    {
        _start = Environment.CpuUsage.TotalTime,
        _call = Stopwatch.GetTimestamp(),
        _least = double.PositiveInfinity,
    };

    /// <summary>Ends a call; the next begins.</summary>
    public void Call()
    {
        _least = Math.Min(_least, Stopwatch.GetElapsedTime(_call).TotalSeconds);
        _call = Stopwatch.GetTimestamp();
        _calls++;
    }

    /// <summary>Ends the round.</summary>
    public readonly Spent Stop() => new((Environment.CpuUsage.TotalTime - _start).TotalSeconds / _calls, _least);
}
