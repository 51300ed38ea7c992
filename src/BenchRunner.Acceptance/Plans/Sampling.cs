using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;

namespace BenchRunner.Acceptance.Plans;

/// <summary>Time base of the scope for one operating point.</summary>
/// <param name="Interval">Sample interval, s.</param>
/// <param name="Needed">Longest interval that edges and ringing allow, s; shorter than <paramref name="Interval"/>
/// where the scope is too slow.</param>
/// <param name="Samples">Samples a channel.</param>
/// <param name="Pretrigger">Time before the first turn-on, s.</param>
internal sealed record Sampling(double Interval, double Needed, int Samples, double Pretrigger)
{
    /// <summary>Time before the first edge: room for noise, levels and the departure's window, s.</summary>
    private const double Before = 1e-6;

    /// <summary>Time after the second turn-off: its gate edge must be in the record, s.</summary>
    private const double After = 1e-6;

    /// <summary>Samples in the shortest edge and in a period of the ringing.</summary>
    private const double PerEvent = 10;

    private static readonly double[] _steps = [1, 2, 4, 5, 8];

    /// <summary>Plans the time base.</summary>
    /// <param name="point">The operating point.</param>
    /// <param name="first">Width of the first pulse, s.</param>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    /// <remarks>The record leaves room for a first pulse that is corrected as far as a correction may go.</remarks>
    public static Sampling Of(OperatingPoint point, double first, Sequence sequence, Bench bench)
    {
        double needed = Math.Min(sequence.Expected.FastestEdge, 1 / sequence.Expected.RingFrequency) / PerEvent;
        double interval = Math.Max(Round(needed), bench.ScopeFastestInterval);
        double length = Before + (first * (1 + WidthCorrection.InAll)) + point.Gap + point.SecondPulse + After;
        double samples = Math.Ceiling(length / interval);
        return new Sampling(interval, needed, samples > int.MaxValue ? int.MaxValue : (int)samples, Before);
    }

    /// <summary>The largest usual interval (1, 2, 4, 5, 8 in a decade) that is not above a time.</summary>
    private static double Round(double time)
    {
        int decade = (int)Math.Floor(Math.Log10(time * (1 + 1e-9)));
        double best = 0;
        foreach (double step in _steps)
        {
            // Divided rather than multiplied: 1 ns is then the very double that a file's "1 ns" is.
            double candidate = decade < 0 ? step / Math.Pow(10, -decade) : step * Math.Pow(10, decade);
            if (candidate <= time * (1 + 1e-9))
            {
                best = candidate;
            }
        }

        return best;
    }
}
