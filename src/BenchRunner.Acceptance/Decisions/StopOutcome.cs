using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Decisions;

/// <summary>
/// Whose fault a stop is: a short, open or dead device is rejected; bench, safety chain and operator stop a run.
/// </summary>
public static class StopOutcome
{
    /// <summary>Load current over its target from which a switch that does not pull its voltage down is not
    /// the cause, but the place beside it, which is shorted, 1.</summary>
    private const double ShootThrough = 2;

    /// <summary>Criteria that speak of a place of the half bridge; they explain whatever else is found with
    /// them.</summary>
    private static readonly string[] _ofPlaces =
        [Criteria.Desaturated, Criteria.HighSideOff, Criteria.FreewheelingOpen];

    /// <summary>What a capture that stops the run means for the device.</summary>
    /// <param name="context">The capture.</param>
    /// <param name="verdict">What was found; at least one finding of class stop.</param>
    /// <returns>
    /// Rejected where the finding speaks of a place under test, else stopped; and the finding that says so. Of several,
    /// one that speaks of a place outweighs the others: a switch that is open has no current at its target either. Not
    /// so where the voltage that would convict the switch is not the voltmeter's before the train: then the probe is
    /// wrong, or another's.
    /// </returns>
    public static (Outcome Outcome, Finding Cause) Of(CaptureContext context, Verdict verdict)
    {
        ArgumentNullException.ThrowIfNull(context);
        ArgumentNullException.ThrowIfNull(verdict);
        Finding[] stops = [.. verdict.Findings.Where(finding => finding.Class == FindingClass.Stop)];
        Channel voltage = HalfBridge.Playing(Channel.VdsLow, HalfBridge.FiresHigh(context.Sequence));
        Finding? probe = stops.FirstOrDefault(
            finding => finding.Criterion == Criteria.BusAgrees && finding.Channel == voltage);
        Finding cause = stops.FirstOrDefault(finding => _ofPlaces.Contains(finding.Criterion)
                && (probe is null || finding.Criterion != Criteria.Desaturated))
            ?? probe ?? stops[0];
        QuantityOwner? place = cause.Criterion switch
        {
            Criteria.Desaturated => ShootsThrough(context, verdict) ? QuantityOwner.Diode : QuantityOwner.Switch,
            Criteria.HighSideOff or Criteria.FreewheelingOpen => QuantityOwner.Diode,
            _ => null,
        };
        return (place is { } fault && HalfBridge.IsUnderTest(context.Sequence, fault)
            ? Outcome.Rejected : Outcome.Stopped, cause);
    }

    /// <summary>What a bus means that stays down in current limit with both gates off.</summary>
    /// <param name="sequence">The sequence.</param>
    /// <returns>Rejected where the blocking place, which is the one that fires, is under test; else stopped: the load
    /// joins the other place's terminals.</returns>
    public static Outcome OfShort(Sequence sequence) =>
        HalfBridge.IsUnderTest(sequence, QuantityOwner.Switch) ? Outcome.Rejected : Outcome.Stopped;

    private static bool ShootsThrough(CaptureContext context, Verdict verdict)
    {
        Channel current = HalfBridge.Playing(Channel.IdLow, HalfBridge.FiresHigh(context.Sequence));
        return context.Analysis.Train.OffCurrent > ShootThrough * context.Planned.Point.LoadCurrent
            || verdict.Findings.Any(finding =>
                finding.Criterion == Criteria.NotClipped && finding.Channel == current);
    }
}
