using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Validity;

/// <summary>Criteria on the train: <c>two-pulses baseline settled temperature-within gate-levels</c>.</summary>
internal static class TrainCriteria
{
    /// <summary>Least tolerance of a width, s.</summary>
    private const double LeastWidthTolerance = 10e-9;

    /// <summary>Relative tolerance of a width, 1.</summary>
    private const double WidthTolerance = 0.02;

    /// <summary>Largest current before the train over the target, 1.</summary>
    private const double BaselineShare = 0.01;

    /// <summary>
    /// How far an off level may lie above what was set before it is a stop, V: a step towards an unwanted turn-on.
    /// </summary>
    private const double OffLevelStop = 0.5;

    /// <summary><c>two-pulses</c>.</summary>
    public static void TwoPulses(CaptureContext context, Judgement judgement)
    {
        TrainFacts train = context.Analysis.Train;
        Channel gate = Gate(context);
        if (!train.IsTwoPulses)
        {
            judgement.Add([IsStuckOn(train) ? StuckOn(train, gate) : WaveformCriteria.Edges(train, gate)]);
            return;
        }

        double tolerance = Math.Max(LeastWidthTolerance, train.GateEdge ?? 0);
        Width("first", train.FirstPulse, context.Set.First, train.On1?.At);
        Width("second", train.SecondPulse, context.Set.Second, train.On2?.At);

        void Width(string name, double? seen, double set, double? at)
        {
            double bound = (WidthTolerance * set) + tolerance;
            if (seen is { } width && Math.Abs(width - set - context.ShownLonger) > bound)
            {
                bool longer = width > set + context.ShownLonger;
                judgement.Add(
                    Criteria.TwoPulses, longer ? FindingClass.Stop : FindingClass.Retry,
                    $"the {name} pulse is {S(width)} long where {S(set)} was set (within {S(bound)}); "
                    + (longer ? "a pulse longer than set stops the run" : "taken again"),
                    gate, width, set, at);
            }
        }
    }

    /// <summary><c>baseline</c>.</summary>
    public static void Baseline(CaptureContext context, Judgement judgement)
    {
        if (ZeroCurrent(context) is not { } zero || context.Analysis.Train.CurrentBeforeOn1 is not { } seen)
        {
            judgement.NotEvaluated(Criteria.Baseline);
            return;
        }

        double bound = BaselineShare * context.Planned.Point.LoadCurrent;
        if (Math.Abs(seen - zero) > bound)
        {
            judgement.Add(
                Criteria.Baseline, FindingClass.Retry,
                $"{Current(context).Name()} is {A(seen - zero)} before the train (at most {A(bound)}): "
                + "the inductor has not decayed, or the probe drifts; the next train waits longer",
                Current(context), seen - zero, bound);
        }
    }

    /// <summary><c>settled</c>: by the decay that the plan states, not by a fit.</summary>
    public static void Settled(CaptureContext context, Judgement judgement)
    {
        TrainFacts train = context.Analysis.Train;
        if (train is not { Off1: { } off1, On2: { } on2, Off2: { } off2 })
        {
            judgement.NotEvaluated(Criteria.Settled);
            return;
        }

        double decay = context.Planned.RingDecay;
        foreach ((string name, double time, double at) in new[]
        {
            ("gap", on2.Departure - off1.At, off1.At),
            ("second pulse", off2.Departure - on2.At, on2.At),
        })
        {
            if (time < decay)
            {
                judgement.Add(
                    Criteria.Settled, FindingClass.Retry,
                    $"the {name} lasts {S(time)}, the ringing may need {S(decay)}; the sequence needs a longer {name}",
                    null, time, decay, at);
            }
        }
    }

    /// <summary><c>temperature-within</c>: where the plate is heated and measured.</summary>
    public static void TemperatureWithin(CaptureContext context, Judgement judgement)
    {
        if (context.Plate is not { } plate || context.Planned.Point.Temperature is not { } wanted)
        {
            judgement.NotEvaluated(Criteria.TemperatureWithin);
            return;
        }

        double bound = context.Sequence.Validity.TemperatureWithin;
        if (Math.Abs(plate - wanted) > bound)
        {
            judgement.Add(
                Criteria.TemperatureWithin, FindingClass.Retry,
                $"the plate is at {SiText.Format(plate, "degC")}, {SiText.Format(wanted, "degC")} is wanted "
                + $"(within {SiText.Format(bound, "K")}); the next train waits for it",
                null, plate - wanted, bound);
        }
    }

    /// <summary><c>gate-levels</c>.</summary>
    public static void GateLevels(CaptureContext context, Judgement judgement)
    {
        TrainFacts train = context.Analysis.Train;
        if (train is not { GateOn: { } on, GateOff: { } off })
        {
            judgement.NotEvaluated(Criteria.GateLevels);
            return;
        }

        double bound = context.Sequence.Validity.GateLevels;
        TrainSet set = context.Set;
        if (Math.Abs(on - set.GateOn) > bound)
        {
            judgement.Add(
                Criteria.GateLevels, FindingClass.Retry,
                $"the gate is on at {V(on)} where {V(set.GateOn)} was set (within {V(bound)}); taken again",
                Gate(context), on, set.GateOn);
        }

        bool stop = off > set.GateOff + OffLevelStop;
        if (stop || Math.Abs(off - set.GateOff) > bound)
        {
            judgement.Add(
                Criteria.GateLevels, stop ? FindingClass.Stop : FindingClass.Retry,
                $"the gate is off at {V(off)} where {V(set.GateOff)} was set (within {V(bound)}); "
                + (stop ? "an off level that high stops the run" : "taken again"),
                Gate(context), off, set.GateOff);
        }
    }

    /// <summary>Whether the second pulse has no end in a record that is planned to hold it: another train would find the
    /// gate on.</summary>
    private static bool IsStuckOn(TrainFacts train) =>
        train is { Edges.Count: 3, On1: not null, Off1: not null, On2: not null, Off2: null };

    private static Finding StuckOn(TrainFacts train, Channel gate) => new(
        Criteria.TwoPulses, FindingClass.Stop, gate, train.Edges.Count, 4, train.On2?.At,
        $"{gate.Name()} is still on at the end of the record: the gate does not go off; the run stops");

    private static Channel Gate(CaptureContext context) =>
        HalfBridge.Playing(Channel.VgsLow, HalfBridge.FiresHigh(context.Sequence));

    private static Channel Current(CaptureContext context) =>
        HalfBridge.Playing(Channel.IdLow, HalfBridge.FiresHigh(context.Sequence));

    /// <summary>The zero capture's current as <see cref="TrainFacts.CurrentBeforeOn1"/> states it: its offset still in
    /// it.</summary>
    private static double? ZeroCurrent(CaptureContext context)
    {
        ChannelSetup? setup = context.Bench.Channels.FirstOrDefault(one => one.Channel == Current(context));
        return context.Zero?.Residual(Current(context)) + ((setup?.Offset ?? 0) / (setup?.Gain ?? 1));
    }

    private static string V(double value) => SiText.Format(value, "V");

    private static string A(double value) => SiText.Format(value, "A", 3);

    private static string S(double value) => SiText.Format(value, "s");
}
