using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Validity;

/// <summary>Says whether one capture is valid, and what the next one should change. Pure.</summary>
public static class CaptureValidity
{
    /// <summary>Judges one capture by every criterion of the catalogue.</summary>
    /// <param name="context">Everything that it rests on.</param>
    /// <returns>
    /// All findings, the criteria that could not be evaluated, the corrected first pulse and the channels that want
    /// another range. A stop that was found outweighs a correction: the run ends.
    /// </returns>
    public static Verdict Judge(CaptureContext context)
    {
        ArgumentNullException.ThrowIfNull(context);
        var judgement = new Judgement();
        RecordCriteria.Complete(context, judgement);
        RecordCriteria.Fresh(context, judgement);
        RecordCriteria.NotClipped(context, judgement);
        RecordCriteria.RangeUsed(context, judgement);
        TrainCriteria.TwoPulses(context, judgement);
        TrainCriteria.Baseline(context, judgement);
        PowerCriteria.BusWithin(context, judgement);
        PowerCriteria.CurrentWithin(context, judgement);
        PowerCriteria.BusDroop(context, judgement);
        FromWaveform(context, judgement);
        TrainCriteria.Settled(context, judgement);
        RecordCriteria.NoiseBelow(context, judgement);
        PowerCriteria.BusAgrees(context, judgement);
        TrainCriteria.TemperatureWithin(context, judgement);
        TrainCriteria.GateLevels(context, judgement);
        return judgement.ToVerdict();
    }

    /// <summary>The criteria that a waveform alone can answer.</summary>
    internal static void FromWaveform(CaptureContext context, Judgement judgement, bool withStraightness = true)
    {
        bool firesHigh = HalfBridge.FiresHigh(context.Sequence);
        TrainFacts train = context.Analysis.Train;
        Channel gate = HalfBridge.Playing(Channel.VgsHigh, firesHigh);
        ChannelSetup? setup = context.Bench.Channels.FirstOrDefault(one => one.Channel == gate);
        if (withStraightness)
        {
            Take(Criteria.RampStraightness, WaveformCriteria.RampStraightness(
                train, context.Sequence.Validity.RampStraightness, HalfBridge.Playing(Channel.IdLow, firesHigh)));
        }

        Take(Criteria.HighSideOff, WaveformCriteria.HighSideOff(
            GateRecord.Of(
                context.Traces.FirstOrDefault(trace => trace.Channel == gate),
                setup?.Correction),
            gate, context.Analysis, context.Bench.HighSideThreshold));
        Take(Criteria.Desaturated, WaveformCriteria.Desaturated(
            train, context.Sequence.Expected.OnVoltage, HalfBridge.Playing(Channel.VdsLow, firesHigh)));

        void Take(string criterion, (bool Evaluated, Finding? Found) answer)
        {
            if (!answer.Evaluated)
            {
                judgement.NotEvaluated(criterion);
            }
            else if (answer.Found is { } found)
            {
                judgement.Add([found]);
            }
        }
    }
}
