using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Validity;

/// <summary>Criteria on bus and load: <c>current-within bus-within bus-droop bus-agrees</c>.</summary>
internal static class PowerCriteria
{
    /// <summary>Largest difference of the switch's voltage and the voltmeter, relative.</summary>
    private const double VoltmeterAgrees = 0.03;

    /// <summary>Largest difference of ramp slope · L and the bus, relative.</summary>
    private const double SlopeAgrees = 0.15;

    /// <summary><c>current-within</c>, with the correction of the first pulse.</summary>
    /// <remarks>A width is corrected by a sound capture alone: not by one with a wrong bus, train or range.</remarks>
    public static void CurrentWithin(CaptureContext context, Judgement judgement)
    {
        if (context.Analysis.Train.OffCurrent is not { } seen)
        {
            judgement.NotEvaluated(Criteria.CurrentWithin);
            return;
        }

        double target = context.Planned.Point.LoadCurrent;
        double bound = context.Sequence.Validity.CurrentWithin;
        double most = context.Bench.Envelope.Current;
        Channel channel = HalfBridge.Playing(Channel.IdLow, HalfBridge.FiresHigh(context.Sequence));
        double? at = context.Analysis.Train.Off1?.At;
        if (seen > most)
        {
            judgement.Add(
                Criteria.CurrentWithin, FindingClass.Stop,
                $"the load current at the first turn-off is {A(seen)}, above the bench envelope of {A(most)}; the "
                + "run stops",
                channel, seen, most, at);
            return;
        }

        double off = (seen / target) - 1;
        if (!(Math.Abs(off) > bound))
        {
            return;
        }

        string found = $"the load current at the first turn-off is {A(seen)}, {SiText.Percent(Math.Abs(off), 2)} "
            + $"{(off > 0 ? "above" : "below")} its target of {A(target)} (within {SiText.Percent(bound)})";
        string[] first =
            [Criteria.BusWithin, Criteria.TwoPulses, Criteria.NotClipped, Criteria.Complete, Criteria.Fresh];
        if (first.Any(judgement.Has))
        {
            judgement.Add(
                Criteria.CurrentWithin, FindingClass.Retry, $"{found}; the other findings are put right first",
                channel, seen, target, at);
            return;
        }

        double set = context.Set.First;
        double planned = context.Planned.FirstPulse;
        if (WidthCorrection.Next(planned, set, target, seen) is { } next)
        {
            judgement.CorrectedFirstPulse = next;
            judgement.Add(
                Criteria.CurrentWithin, FindingClass.Retry, $"{found}; first pulse from {S(set)} to {S(next)}",
                channel, seen, target, at);
        }
        else
        {
            judgement.Add(
                Criteria.CurrentWithin, FindingClass.Stop,
                $"{found}; the first pulse would have to be more than {SiText.Percent(WidthCorrection.InAll)} off "
                + $"the planned {S(planned)}: the bench is not what its file says; the run stops",
                channel, seen, target, at);
        }
    }

    /// <summary><c>bus-within</c>.</summary>
    public static void BusWithin(CaptureContext context, Judgement judgement)
    {
        if (context.Analysis.Train.BusBeforeOn1 is not { } seen)
        {
            judgement.NotEvaluated(Criteria.BusWithin);
            return;
        }

        double target = context.Planned.Point.BusVoltage;
        double most = context.Bench.Envelope.Voltage;
        double bound = context.Sequence.Validity.BusWithin;
        if (seen > most)
        {
            judgement.Add(
                Criteria.BusWithin, FindingClass.Stop,
                $"the bus is at {V(seen)} before the train, above the bench envelope of {V(most)}; the run stops",
                BusChannel(context), seen, most);
        }
        else if (Math.Abs(seen - target) > bound * target)
        {
            judgement.Add(
                Criteria.BusWithin, FindingClass.Retry,
                $"the bus is at {V(seen)} before the train, {V(target)} is wanted (within {SiText.Percent(bound)}); "
                + "the next train waits for it",
                BusChannel(context), seen, target);
        }
    }

    /// <summary><c>bus-droop</c>.</summary>
    public static void BusDroop(CaptureContext context, Judgement judgement)
    {
        TrainFacts train = context.Analysis.Train;
        if (train is not { BusBeforeOn1: { } before, BusBeforeOff1: { } after } || before <= 0)
        {
            judgement.NotEvaluated(Criteria.BusDroop);
            return;
        }

        double bound = context.Sequence.Validity.BusDroop;
        double droop = (before - after) / before;
        if (droop > bound)
        {
            judgement.Add(
                Criteria.BusDroop, FindingClass.Retry,
                $"the first pulse takes {SiText.Percent(droop)} of the bus, from {V(before)} to {V(after)} "
                + $"(at most {SiText.Percent(bound)}); taken again from a charged bank",
                Channel.Vbus, droop, bound, train.Off1?.At);
        }
    }

    /// <summary>
    /// <c>bus-agrees</c>: both comparisons; where one cannot be made the criterion is not evaluated, never met.
    /// </summary>
    /// <remarks>Not evaluated on a clipped trace either: what a rail cut off is no doubt about the bench.</remarks>
    public static void BusAgrees(CaptureContext context, Judgement judgement)
    {
        TrainFacts train = context.Analysis.Train;
        bool firesHigh = HalfBridge.FiresHigh(context.Sequence);
        if (judgement.IsClipped(HalfBridge.Playing(Channel.VdsLow, firesHigh))
            || judgement.IsClipped(HalfBridge.Playing(Channel.IdLow, firesHigh)))
        {
            judgement.NotEvaluated(Criteria.BusAgrees);
            return;
        }

        Channel channel = HalfBridge.Playing(Channel.VdsLow, firesHigh);
        double? less = train.BlockingBeforeOn1 - (context.Zero?.Residual(channel) ?? 0);
        if (less is { } blocking && context.Voltmeter is { } bank)
        {
            if (!(Math.Abs(blocking - bank) <= VoltmeterAgrees * Math.Abs(bank)))
            {
                judgement.Add(
                    Criteria.BusAgrees, FindingClass.Stop,
                    $"{channel.Name()} is {V(blocking)} before the train, the voltmeter reads {V(bank)} "
                    + $"(within {SiText.Percent(VoltmeterAgrees)}): a probe's factor, or a device that does not block; "
                    + "the run stops",
                    channel, blocking, bank);
            }
        }
        else
        {
            judgement.NotEvaluated(Criteria.BusAgrees);
        }

        if (train.RampSlope is { } slope && (context.Voltmeter ?? train.BusBeforeOn1) is { } bus)
        {
            double across = slope * context.Bench.LoadInductance;
            if (!(Math.Abs(across - bus) <= SlopeAgrees * Math.Abs(bus)))
            {
                judgement.Add(
                    Criteria.BusAgrees, FindingClass.Stop,
                    $"the first ramp of {SiText.Format(slope, "A/s", 3)} in "
                    + $"{SiText.Format(context.Bench.LoadInductance, "H")} "
                    + $"means {V(across)}, the bus is at {V(bus)} (within {SiText.Percent(SlopeAgrees)}): "
                    + "a current probe's factor or direction, or another inductor; the run stops",
                    HalfBridge.Playing(Channel.IdLow, firesHigh), across, bus);
            }
        }
        else
        {
            judgement.NotEvaluated(Criteria.BusAgrees);
        }
    }

    private static Channel BusChannel(CaptureContext context) =>
        context.Traces.Any(trace => trace.Channel == Channel.Vbus)
            ? Channel.Vbus
            : HalfBridge.Playing(Channel.VdsLow, HalfBridge.FiresHigh(context.Sequence));

    private static string V(double value) => SiText.Format(value, "V");

    private static string A(double value) => SiText.Format(value, "A");

    private static string S(double value) => SiText.Format(value, "s");
}
