using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Comparisons;

/// <summary>Which samples of the measured record are compared, and how both records' positions go together.</summary>
/// <param name="From">First sample of the measured record.</param>
/// <param name="Count">Samples of it.</param>
/// <param name="Meaning">What the stretch is.</param>
/// <param name="Guess">About by how many measured samples the measured record is later; null: not known.</param>
internal sealed record Stretch(int From, int Count, string Meaning, double? Guess)
{
    private const double FirstReach = 0.1;
    private const double LastReach = 0.5;
    private const int LeastReach = 20;
    private const int MostReach = 2000;

    /// <summary>Position in the reference of the stretch's first sample, were there no shift.</summary>
    public required double Start { get; init; }

    /// <summary>Samples of the reference for one of the measured record.</summary>
    public required double Step { get; init; }

    /// <summary>How far around the guess the shift is sought first, in measured samples.</summary>
    public int Reach => Math.Clamp((int)(FirstReach * Count), LeastReach, MostReach);

    /// <summary>How far it is sought at most.</summary>
    public int FarthestReach => Math.Clamp((int)(LastReach * Count), LeastReach, MostReach);

    /// <summary>The second turn-on with its ringing where both have one, else the whole measured record.</summary>
    public static Stretch Find(Waveform measured, AnalysisResult said, Waveform reference, AnalysisResult other)
    {
        double dt = measured.SampleInterval;
        double step = dt / reference.SampleInterval;
        Stretch Over(double from, double to, string meaning, double? guess)
        {
            int first = (int)Math.Clamp(Math.Ceiling((from - measured.TimeOrigin) / dt), 0, measured.Count);
            int end = (int)Math.Clamp(Math.Floor((to - measured.TimeOrigin) / dt) + 1, first, measured.Count);
            return new Stretch(first, end - first, meaning, guess)
            {
                Start = Whole((measured.TimeAt(first) - reference.TimeOrigin) / reference.SampleInterval),
                Step = step,
            };
        }

        double end = measured.TimeAt(measured.Count - 1);
        if (said.Train.On2 is not { } on2 || other.Train.On2 is not { } reference2)
        {
            return Over(measured.TimeOrigin, end, "the whole measured record", null);
        }

        double shift = on2.At - reference2.At;
        (double to, string what) =
            RingEnd(said) is { } own ? (own, "to the end of its ringing")
            : RingEnd(other) is { } theirs ? (theirs + shift, "to the end of the reference's ringing")
            : said.Train.Off2 is { } off2 ? (off2.Departure, "to off2")
            : (end, "to the record's end");
        to = Math.Min(to, said.Train.Off2?.Departure ?? end);
        return Over(on2.Departure, to, $"from on2's departure {what}", shift / dt);
    }

    /// <summary>A position without the rounding of its times, which would cost equal grids their equal
    /// samples.</summary>
    private static double Whole(double position) =>
        Math.Abs(position - Math.Round(position)) < 1e-6 ? Math.Round(position) : position;

    private static double? RingEnd(AnalysisResult result)
    {
        foreach (QuantityValue value in result.Quantities)
        {
            if (value.Quantity == "ring_frequency")
            {
                return value.To;
            }
        }

        return null;
    }
}
