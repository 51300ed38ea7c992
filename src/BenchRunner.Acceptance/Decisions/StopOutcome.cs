using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Quantities;

namespace BenchRunner.Acceptance.Decisions;

/// <summary>
/// Whose fault a stop is: a short, open or dead device is rejected; bench, safety chain and operator stop a run.
/// </summary>
public static class StopOutcome
{
    /// <summary>Outcome of a device whose run a finding stopped.</summary>
    /// <param name="finding">The finding, of class stop.</param>
    /// <param name="sequence">The sequence: which place is under test.</param>
    /// <returns>Rejected where the finding speaks of the place under test, else stopped.</returns>
    public static Outcome Of(Finding finding, Sequence sequence)
    {
        ArgumentNullException.ThrowIfNull(finding);
        ArgumentNullException.ThrowIfNull(sequence);
        QuantityOwner? place = finding.Criterion switch
        {
            Criteria.Desaturated => QuantityOwner.Switch,
            Criteria.HighSideOff => QuantityOwner.Diode,
            _ => null,
        };
        return place is { } fault && HalfBridge.IsUnderTest(sequence, fault) ? Outcome.Rejected : Outcome.Stopped;
    }
}
