using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Acceptance.Validity;

/// <summary>Whether the blocking place holds the bus off: by the supply's current, then by the bank's own discharge.
/// Pure.</summary>
/// <remarks>
/// i = C ΔV/Δt less what the bench draws with an empty socket. The load joins the terminals of the freewheeling place,
/// so that the blocking place alone is tested. The supply's current comes first, since it needs no switching: what a
/// leakage at its limit, the empty socket and three times the stated read-back accuracy do not explain is too much.
/// </remarks>
public static class LeakageHold
{
    /// <summary>Multiples of the stated accuracy that a reading may be off.</summary>
    private const double Accuracies = 3;

    /// <summary>Time for which the bank is left alone.</summary>
    public static TimeSpan Time { get; } = TimeSpan.FromMilliseconds(100);

    /// <summary>Whether the supply alone says that more flows than a sound device lets through.</summary>
    /// <param name="current">What the supply said, A.</param>
    /// <param name="bench">The bench.</param>
    /// <param name="sequence">The sequence.</param>
    /// <returns>What was found, in words; null where nothing was, or where the bench states no accuracy.</returns>
    public static string? Drawn(double current, Bench bench, Sequence sequence)
    {
        ArgumentNullException.ThrowIfNull(bench);
        ArgumentNullException.ThrowIfNull(sequence);
        if (bench.SupplyCurrentAccuracy is not { } accuracy)
        {
            return null;
        }

        double bound = (Accuracies * accuracy) + bench.EmptySocketCurrent + (sequence.Leakage ?? 0);
        return current <= bound ? null
            : $"the supply gives {A(current)} with both gates off (at most {A(bound)}): the {Place(sequence)} place leaks";
    }

    /// <summary>The leakage, A.</summary>
    /// <param name="reading">What was measured.</param>
    /// <param name="bench">The bench.</param>
    public static double Current(LeakageReading reading, Bench bench)
    {
        ArgumentNullException.ThrowIfNull(reading);
        ArgumentNullException.ThrowIfNull(bench);
        return (bench.BusCapacitance * (reading.First - reading.Last) / reading.Seconds) - bench.EmptySocketCurrent;
    }

    /// <summary>Whether a hold meets the sequence's <c>leakage:</c>.</summary>
    /// <param name="reading">What was measured.</param>
    /// <param name="bench">The bench.</param>
    /// <param name="sequence">The sequence.</param>
    public static bool Conforms(LeakageReading reading, Bench bench, Sequence sequence)
    {
        ArgumentNullException.ThrowIfNull(sequence);
        return !(Current(reading, bench) > sequence.Leakage);
    }

    /// <summary>The hold in words: what was measured, and which place it speaks of.</summary>
    /// <param name="reading">What was measured.</param>
    /// <param name="bench">The bench.</param>
    /// <param name="sequence">The sequence.</param>
    public static string Words(LeakageReading reading, Bench bench, Sequence sequence)
    {
        ArgumentNullException.ThrowIfNull(sequence);
        string bound = sequence.Leakage is { } most ? $"at most {A(most)}" : "no limit stated";
        return $"{A(Current(reading, bench))} leak through the {Place(sequence)} place at "
            + $"{SiText.Format(reading.First, "V")} ({bound}); the other place is not tested by this: the load lies "
            + "across it";
    }

    private static string Place(Sequence sequence) => HalfBridge.FiresHigh(sequence) ? "high" : "low";

    private static string A(double value) => SiText.Format(value, "A", 3);
}
