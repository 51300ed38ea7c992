using BenchRunner.Acceptance.Files;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Validity;

/// <summary>Criteria that a waveform alone can answer: <c>two-pulses</c> (edges), <c>ramp-straightness high-side-off
/// desaturated</c>.</summary>
internal static class WaveformCriteria
{
    /// <summary>Growth of the ramp's slope that is a stop, relative.</summary>
    private const double GrowthStop = 0.20;

    /// <summary>On-state voltage over the bus from which a switch counts as desaturated, 1.</summary>
    private const double DesaturatedShare = 0.05;

    /// <summary>On-state voltage over the stated one from which a switch counts as desaturated, 1.</summary>
    private const double DesaturatedFactor = 3;

    /// <summary>The finding of a train whose edges are not on, off, on, off.</summary>
    public static Finding Edges(TrainFacts train, Channel gate) => new(
        Criteria.TwoPulses, FindingClass.Retry, gate, train.Edges.Count, 4,
        train.Edges.Count > 0 ? train.Edges[0].At : null,
        $"{gate.Name()} has {train.Edges.Count} edges where a train of two pulses has 4 (on, off, on, off); "
        + "taken again");

    /// <summary><c>ramp-straightness</c>.</summary>
    /// <returns>Whether it could be evaluated, and the finding.</returns>
    public static (bool Evaluated, Finding? Found) RampStraightness(TrainFacts train, double bound, Channel current)
    {
        if (train.RampGrowth is { } growth && growth > GrowthStop)
        {
            return (true, new Finding(
                Criteria.RampStraightness, FindingClass.Stop, current, growth, GrowthStop, train.Off1?.At,
                $"the slope of the first ramp grows by {SiText.Percent(growth)} "
                + $"(at most {SiText.Percent(GrowthStop)}): the inductor saturates, or a device fails; the run stops"));
        }

        if (train.RampStraightness is not { } bend)
        {
            return (false, null);
        }

        return (true, bend <= bound ? null : new Finding(
            Criteria.RampStraightness, FindingClass.Retry, current, bend, bound, train.Off1?.At,
            $"the first ramp is off a straight line by {SiText.Percent(bend)} of its end "
            + $"(at most {SiText.Percent(bound)}); taken again"));
    }

    /// <summary><c>desaturated</c>.</summary>
    /// <param name="train">Facts of the train.</param>
    /// <param name="onVoltage">The stated on-state voltage, V; 0: not stated.</param>
    /// <param name="voltage">The switch's voltage channel.</param>
    /// <returns>Whether it could be evaluated, and the finding.</returns>
    public static (bool Evaluated, Finding? Found) Desaturated(TrainFacts train, double onVoltage, Channel voltage)
    {
        if (train is not { OnStateMaximum: { } seen, BusBeforeOn1: { } bus })
        {
            return (false, null);
        }

        double bound = Math.Max(DesaturatedShare * bus, DesaturatedFactor * onVoltage) + (train.OnStateHysteresis ?? 0);
        return (true, seen <= bound ? null : new Finding(
            Criteria.Desaturated, FindingClass.Stop, voltage, seen, bound, train.OnStateMaximumAt,
            $"{voltage.Name()} is {SiText.Format(seen, "V")} with the gate on (at most {SiText.Format(bound, "V")} "
            + "on a bus "
            + $"of {SiText.Format(bus, "V")}): the switch is not fully on, or the other place conducts; "
            + "the run stops"));
    }

    /// <summary><c>high-side-off</c>: the gate held off, from the second turn-on to the end of recovery.</summary>
    /// <param name="samples">The gate's record.</param>
    /// <param name="gate">Its channel.</param>
    /// <param name="analysis">What the analysis found: the turn-on, and the end of recovery.</param>
    /// <param name="threshold">The threshold, V; null: not stated.</param>
    /// <returns>Whether it could be evaluated, and the finding.</returns>
    public static (bool Evaluated, Finding? Found) HighSideOff(
        GateRecord? samples, Channel gate, AnalysisResult analysis, double? threshold)
    {
        double? end = analysis.Quantities.FirstOrDefault(value =>
            value.Quantity == "trr" && value.Value is not null)?.To;
        if (samples is null || threshold is not { } bound || analysis.Train.On2 is not { } on2 || end is not { } last)
        {
            return (false, null);
        }

        (double highest, double at) = samples.Highest(on2.Departure, last);
        return (true, !(highest > bound) ? null : new Finding(
            Criteria.HighSideOff, FindingClass.Stop, gate, highest, bound, at,
            $"{gate.Name()} reaches {SiText.Format(highest, "V")} during recovery "
            + $"(at most {SiText.Format(bound, "V")}): the switch held off turns on; the run stops"));
    }
}
