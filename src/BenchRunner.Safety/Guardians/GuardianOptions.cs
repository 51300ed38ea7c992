using BenchRunner.Acceptance.Benches;
using BenchRunner.Safety.SafeStates;

namespace BenchRunner.Safety.Guardians;

/// <summary>The guardian's bounds.</summary>
/// <param name="Silence">How long no beat may come before it acts.</param>
/// <param name="MakingSafeWithin">How long a runner may be on its way to the safe state before it is ended after all.</param>
/// <param name="TryFor">How long it tries to prove the bus down before it says that it could not.</param>
public sealed record GuardianOptions(TimeSpan Silence, TimeSpan MakingSafeWithin, TimeSpan TryFor)
{
    private static readonly TimeSpan _usualTrying = TimeSpan.FromSeconds(30);
    private static readonly TimeSpan _usualWatching = TimeSpan.FromSeconds(2);

    /// <summary>How long after silence began to count what has come already is still looked for: a guardian that the machine
    /// itself held up must not take its own delay for the runner's.</summary>
    public TimeSpan Grace { get; init; } = TimeSpan.FromMilliseconds(20);

    /// <summary>Voltage below which the bank is down, V: a runner whose beats say that it was proved down may take its time
    /// over its evidence. 0: a runner never may.</summary>
    public double DownBelow { get; init; }

    /// <summary>How long it watches a bus on that it has proved down: what rises again alarms and is brought down
    /// again.</summary>
    public TimeSpan WatchAfterProof { get; init; }

    /// <summary>The bounds of a bench. Making safe may take twice the discharge that its envelope plans, and what the bench
    /// file allows on top of that.</summary>
    public static GuardianOptions Of(Bench bench)
    {
        ArgumentNullException.ThrowIfNull(bench);
        double down = bench.Safety.DownBelow(bench.BusCapacitance);
        double planned = new Discharge(bench.Bleeder, bench.BusCapacitance).TimeTo(bench.Envelope.Voltage, down);
        return new GuardianOptions(
            TimeSpan.FromSeconds(bench.Safety.GuardianSilence),
            TimeSpan.FromSeconds((2 * planned) + bench.Safety.DischargeWithin),
            _usualTrying)
        {
            DownBelow = down,
            WatchAfterProof = _usualWatching,
        };
    }
}
