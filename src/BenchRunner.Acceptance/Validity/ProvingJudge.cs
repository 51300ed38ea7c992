using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Validity;

/// <summary>Judges a proving train: whether bench and device are what the files say. Pure.</summary>
/// <remarks>
/// By the criteria that speak of bench and device, with <c>bus-agrees</c> for sign and size of the current; not by
/// those that select captures of a measurement (current at target, bus and droop within, range used, straightness,
/// noise), which mean little at a tenth of the current.
/// </remarks>
public static class ProvingJudge
{
    /// <summary>Least share of the current at the first turn-off that must still flow at the second turn-on, 1.</summary>
    /// <remarks>Freewheeling takes some percent; an open freewheeling place takes all of it.</remarks>
    private const double CarriedAtLeast = 0.5;

    /// <summary>Share of the second pulse, at its end, over which the ramp is looked at, 1.</summary>
    private const double RampEnd = 0.1;

    /// <summary>Judges one proving train.</summary>
    /// <param name="context">Everything that it rests on.</param>
    public static Verdict Judge(CaptureContext context)
    {
        ArgumentNullException.ThrowIfNull(context);
        var judgement = new Judgement();
        RecordCriteria.Complete(context, judgement);
        RecordCriteria.Fresh(context, judgement);
        RecordCriteria.NotClipped(context, judgement);
        TrainCriteria.TwoPulses(context, judgement);
        TrainCriteria.Baseline(context, judgement);
        CaptureValidity.FromWaveform(context, judgement, withStraightness: false);
        Carried(context, judgement);
        PowerCriteria.BusAgrees(context, judgement);
        TrainCriteria.GateLevels(context, judgement);
        return judgement.ToVerdict();
    }

    /// <summary>How much longer than set the pulses of a sound proving train were, s: the width that later trains are
    /// held to.</summary>
    /// <param name="context">The train.</param>
    public static double ShownLonger(CaptureContext context)
    {
        ArgumentNullException.ThrowIfNull(context);
        return (context.Analysis.Train.FirstPulse ?? context.Set.First) - context.Set.First;
    }

    private static void Carried(CaptureContext context, Judgement judgement)
    {
        if (context.Analysis.Train.OffCurrent is not { } off || OnCurrent(context) is not { } on)
        {
            judgement.NotEvaluated(Criteria.FreewheelingOpen);
            return;
        }

        // Without a current at the first turn-off there is nothing that could go on flowing.
        if (off > CarriedAtLeast * context.Planned.Point.LoadCurrent && on < CarriedAtLeast * off)
        {
            judgement.Add(
                Criteria.FreewheelingOpen, FindingClass.Stop,
                $"of {SiText.Format(off, "A", 3)} at the first turn-off {SiText.Format(on, "A", 3)} flow at the second "
                + $"turn-on (at least {SiText.Percent(CarriedAtLeast)}): the freewheeling place does not conduct; "
                + "no further train is fired",
                Current(context), on, CarriedAtLeast * off, context.Analysis.Train.On2?.At);
        }
    }

    /// <summary>Load current at the second turn-on, A: the end of the second pulse less what its ramp adds.</summary>
    /// <remarks>Not <c>i_on</c>: where the freewheeling place is open, vds is clipped and there is no load
    /// line.</remarks>
    private static double? OnCurrent(CaptureContext context)
    {
        TrainFacts train = context.Analysis.Train;
        Channel current = Current(context);
        if (train is not { On2: { } on2, Off2: { } off2, RampSlope: { } slope, CurrentBeforeOn1: { } zero }
            || context.Traces.FirstOrDefault(trace => trace.Channel == current) is not { } trace)
        {
            return null;
        }

        double gain = context.Bench.Channels.FirstOrDefault(setup => setup.Channel == current)?.Gain ?? 1;
        int Sample(double at) => (int)Math.Clamp((at - trace.TimeOrigin) / trace.SampleInterval, 0, trace.Codes.Length);
        int from = Sample(off2.Departure - (RampEnd * (off2.At - on2.At)));
        int to = Sample(off2.Departure);
        double sum = 0;
        for (int i = from; i < to; i++)
        {
            sum += trace.Value(trace.Codes[i]);
        }

        double middle = trace.TimeOrigin + (0.5 * (from + to) * trace.SampleInterval);
        return to > from ? (sum / (to - from) / gain) - zero - (slope * (middle - on2.At)) : null;
    }

    private static Channel Current(CaptureContext context) =>
        HalfBridge.Playing(Channel.IdLow, HalfBridge.FiresHigh(context.Sequence));
}
