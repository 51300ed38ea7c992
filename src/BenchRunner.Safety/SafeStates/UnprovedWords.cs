using BenchRunner.Acceptance.Events;
using BenchRunner.Safety.Watches;

namespace BenchRunner.Safety.SafeStates;

/// <summary>Says that a bus is not proved down: at once, when what is known has changed, and each 10 s; said with every
/// attempt, nobody would read it.</summary>
internal sealed class UnprovedWords(BusWitness witness, EventSource events, TimeProvider time)
{
    private static readonly TimeSpan Again = TimeSpan.FromSeconds(10);
    private string? _said;
    private long _at;

    /// <summary>Whether the last attempt failed.</summary>
    public bool Stands => _said is not null;

    /// <summary>An attempt has failed.</summary>
    /// <param name="report">What it gave.</param>
    /// <param name="known">Which instruments did not do as they were told; the bus's own figures change all the
    /// time.</param>
    public void Say(SafeStateReport report, IEnumerable<string> known)
    {
        string now = string.Join('\n', known.Append(witness.WhyNot).Append(report.Voltage is null ? "silent" : "read"));
        if (now == _said && time.GetElapsedTime(_at) < Again)
        {
            return;
        }

        (_said, _at) = (now, time.GetTimestamp());
        foreach (string doubt in report.Doubts)
        {
            events.Say(Severity.Error, "safe-state-doubt", doubt);
        }

        string last = report.Voltage is { } volts
            ? $"last reading {witness.Discharge.Words(volts)}" : "no reading";
        events.Say(
            Severity.Alarm,
            "bus-not-proved-down",
            $"THE BUS IS NOT PROVED DOWN ({last}; {witness.AtMost}). Treat it as charged. WAIT. DO NOT OPEN the "
                + "enclosure. Have a licensed person isolate the supply and discharge the bank with a discharge stick, "
                + "by your lab's own procedure; its rules and the codes of your place come first.");
    }

    /// <summary>The bus is proved down.</summary>
    public void End() => _said = null;
}
