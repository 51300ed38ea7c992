using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Validity;

/// <summary>Criteria on the record itself: <c>complete fresh not-clipped range-used noise-below</c>.</summary>
internal static class RecordCriteria
{
    /// <summary>Samples at a rail that make a trace clipped.</summary>
    private const int ClippedFrom = 3;

    /// <summary>Least share of full scale that a swinging trace must fill, 1.</summary>
    private const double LeastUse = 0.25;

    /// <summary>Share of what bus, load current and gate must fill by the plan that is asked for, 1.</summary>
    private const double LeastOfSwing = 0.8;

    /// <summary>Share at the end of a state that counts as quiet in any case, 1.</summary>
    private const double LastShare = 0.1;

    /// <summary>Difference of sample intervals that is rounding of a scope's preamble, relative.</summary>
    private const double SameInterval = 1e-6;

    /// <summary>Captures that are not fresh, in a row, that end the run.</summary>
    private const int StaleAtMost = 3;

    /// <summary><c>complete</c>.</summary>
    public static void Complete(CaptureContext context, Judgement judgement)
    {
        PlannedPoint planned = context.Planned;
        foreach (PlannedRange range in planned.Ranges)
        {
            string name = range.Channel.Name();
            if (context.Traces.FirstOrDefault(trace => trace.Channel == range.Channel) is not { } trace)
            {
                judgement.Add(
                    Criteria.Complete, FindingClass.Retry, $"{name} is missing from the record; taken again",
                    range.Channel);
                continue;
            }

            if (trace.Codes.Length < planned.Samples)
            {
                judgement.Add(
                    Criteria.Complete, FindingClass.Retry,
                    $"{name} has {trace.Codes.Length} samples of the {planned.Samples} asked for; taken again",
                    range.Channel, trace.Codes.Length, planned.Samples);
            }

            if (Math.Abs(trace.SampleInterval - planned.SampleInterval) > SameInterval * planned.SampleInterval)
            {
                judgement.Add(
                    Criteria.Complete, FindingClass.Retry,
                    $"{name} has a sample every {SiText.Format(trace.SampleInterval, "s")} where "
                    + $"{SiText.Format(planned.SampleInterval, "s")} was set; the time base is set again",
                    range.Channel, trace.SampleInterval, planned.SampleInterval);
            }
        }
    }

    /// <summary><c>fresh</c>.</summary>
    public static void Fresh(CaptureContext context, Judgement judgement)
    {
        bool counted = context is { CountBefore: not null, CountAfter: not null };
        string? stale = counted && context.CountAfter <= context.CountBefore
            ? $"the scope's acquisition count stayed at {context.CountAfter}"
            : IsRepeated(context) ? "every code is that of the capture before" : null;
        if (stale is not null)
        {
            int row = context.StaleBefore + 1;
            bool stop = row >= StaleAtMost;
            judgement.Add(
                Criteria.Fresh, stop ? FindingClass.Stop : FindingClass.Retry,
                $"{stale}: an old record ({row} in a row); {(stop ? "the run stops" : "the scope is armed again")}",
                seen: row, bound: StaleAtMost);
        }
        else if (!counted && context.Previous.Count == 0)
        {
            judgement.NotEvaluated(Criteria.Fresh);
        }
    }

    /// <summary><c>not-clipped</c>: up to the second turn-off; nothing that follows it is evaluated.</summary>
    public static void NotClipped(CaptureContext context, Judgement judgement)
    {
        double end = context.Analysis.Train.Off2?.Departure ?? double.PositiveInfinity;
        foreach (RawTrace trace in context.Traces)
        {
            int clipped = 0;
            int first = 0;
            int last = (int)Math.Clamp((end - trace.TimeOrigin) / trace.SampleInterval, 0, trace.Codes.Length);
            for (int i = 0; i < last; i++)
            {
                if (trace.Codes[i] <= trace.LowRail || trace.Codes[i] >= trace.HighRail)
                {
                    first = clipped++ == 0 ? i : first;
                }
            }

            if (clipped >= ClippedFrom)
            {
                double at = trace.TimeOrigin + (first * trace.SampleInterval);
                string unit = trace.Channel.Unit();
                judgement.NextRange(trace.Channel, wider: true);
                judgement.Add(
                    Criteria.NotClipped, FindingClass.Retry,
                    $"{trace.Channel.Name()} is at a rail of the ADC "
                    + $"({SiText.Format(trace.Value(trace.Codes[first]), unit)}) "
                    + $"for {clipped} samples from {SiText.Format(at, "s")}; next range {Next(trace, wider: true)}",
                    trace.Channel, clipped, ClippedFrom, at);
            }
        }
    }

    /// <summary><c>range-used</c>: on the channels that bus, load current and gate move.</summary>
    /// <remarks>
    /// Without the edges and the ringing after them: how high a recovery peaks must not decide whether its capture is
    /// kept. Where the plan leaves so much room for it that bus and load current alone would fill less than a quarter,
    /// four fifths of what they must fill are asked for.
    /// </remarks>
    public static void RangeUsed(CaptureContext context, Judgement judgement)
    {
        foreach (PlannedRange planned in context.Planned.Ranges.Where(range => range.Swing > 0))
        {
            RawTrace? trace = context.Traces.FirstOrDefault(trace => trace.Channel == planned.Channel);
            if (trace is not { Codes.Length: > 0 })
            {
                continue;
            }

            double least = Math.Min(LeastUse, LeastOfSwing * planned.Swing / planned.Span);
            double used = Quiet(trace, context) / (double)(trace.HighRail - trace.LowRail);
            if (used < least)
            {
                judgement.NextRange(trace.Channel, wider: false);
                judgement.Add(
                    Criteria.RangeUsed, FindingClass.Retry,
                    $"{trace.Channel.Name()} uses {SiText.Percent(used)} of its range "
                    + $"(at least {SiText.Percent(least, 2)}); next range {Next(trace, wider: false)}",
                    trace.Channel, used, least);
            }
        }
    }

    /// <summary>Peak to peak in codes, outside the edges and the ringing that the plan gives them.</summary>
    private static int Quiet(RawTrace trace, CaptureContext context)
    {
        TrainFacts train = context.Analysis.Train;
        double decay = context.Planned.RingDecay;
        (double From, double To)[] quiet = train is { Off1: { } off1, On2: { } on2, Off2: { } off2 }
            ?
            [
                (double.NegativeInfinity, off1.Departure),
                (Decayed(off1.At, on2.Departure), on2.Departure),
                (Decayed(on2.At, off2.Departure), off2.Departure),
            ]
            : [(double.NegativeInfinity, double.PositiveInfinity)];
        int low = int.MaxValue;
        int high = int.MinValue;
        foreach ((double from, double to) in quiet)
        {
            for (int i = Sample(from); i < Sample(to); i++)
            {
                low = Math.Min(low, trace.Codes[i]);
                high = Math.Max(high, trace.Codes[i]);
            }
        }

        return high > low ? high - low : 0;

        // The last tenth of a state counts even where the plan lets the ringing last longer (settled speaks of that).
        double Decayed(double edge, double next) => Math.Min(edge + decay, next - (LastShare * (next - edge)));

        int Sample(double at) =>
            (int)Math.Clamp(Math.Ceiling((at - trace.TimeOrigin) / trace.SampleInterval), 0, trace.Codes.Length);
    }

    /// <summary><c>noise-below</c>.</summary>
    public static void NoiseBelow(CaptureContext context, Judgement judgement)
    {
        double bound = context.Sequence.Validity.NoiseBelow;
        foreach (RawTrace trace in context.Traces)
        {
            if (!context.Analysis.Train.Noise.TryGetValue(trace.Channel, out double sigma))
            {
                judgement.NotEvaluated(Criteria.NoiseBelow);
                continue;
            }

            // The analysis states noise of true values; full scale is of recorded ones.
            double gain = context.Bench.Channels.FirstOrDefault(setup => setup.Channel == trace.Channel)?.Gain ?? 1;
            double share = sigma * Math.Abs(gain) / trace.FullScale;
            if (share > bound)
            {
                judgement.Add(
                    Criteria.NoiseBelow, FindingClass.Retry,
                    $"{trace.Channel.Name()} has noise of {SiText.Format(sigma, trace.Channel.Unit(), 3)}, "
                    + $"{SiText.Percent(share)} of full scale (at most {SiText.Percent(bound)}); taken again",
                    trace.Channel, share, bound);
            }
        }
    }

    private static bool IsRepeated(CaptureContext context) =>
        context.Traces.Count > 0
        && context.Previous.Count == context.Traces.Count
        && context.Traces.All(trace => context.Previous.FirstOrDefault(old => old.Channel == trace.Channel) is { } old
            && trace.Codes.AsSpan().SequenceEqual(old.Codes));

    private static string Next(RawTrace trace, bool wider) =>
        SiText.Format(wider ? 2 * trace.FullScale : trace.FullScale / 2, trace.Channel.Unit());
}
