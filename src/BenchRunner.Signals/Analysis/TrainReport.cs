using BenchRunner.Signals.Edges;
using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Recovery;
using BenchRunner.Signals.Switching;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Analysis;

/// <summary>Writes down the facts that validity rests on.</summary>
internal static class TrainReport
{
    private const double OnStateFrom = 0.25;

    public static TrainFacts Form(Analyser analyser, Waveform recorded, AnalysisSettings settings)
    {
        Train train = analyser.Train;
        (double? most, double? mostAt) = OnStateMaximum(analyser);
        (double? gate, double? gateAt) = FreewheelingGateMaximum(analyser);
        return new TrainFacts
        {
            Edges = [.. train.Edges.Select(e => ToPulseEdge(analyser.Record, e))],
            IsTwoPulses = train.IsTwoPulses,
            On1 = ToPulseEdge(analyser.Record, train.On1),
            Off1 = ToPulseEdge(analyser.Record, train.Off1),
            On2 = ToPulseEdge(analyser.Record, train.On2),
            Off2 = ToPulseEdge(analyser.Record, train.Off2),
            GateEdge = GateEdge(analyser),
            GateOn = Value(train.GateOn),
            GateOff = Value(train.GateOff),
            OffCurrent = Value(analyser.Ramp.OffCurrent),
            RampSlope = Value(analyser.Ramp.Slope),
            RampStraightness = Value(analyser.Ramp.Straightness),
            RampGrowth = Value(analyser.Ramp.Growth),
            BusBeforeOn1 = BusBefore(analyser, train.On1, orVds: true),
            BusBeforeOff1 = BusBefore(analyser, train.Off1, orVds: false),
            BlockingBeforeOn1 = MeanBeforeOn1(analyser, analyser.Record, Channel.VdsLow),
            CurrentBeforeOn1 = CurrentBeforeOn1(analyser, recorded, settings),
            OnStateMaximum = most,
            OnStateMaximumAt = mostAt,
            OnStateHysteresis = OnStateHysteresis(analyser),
            FreewheelingGateMaximum = gate,
            FreewheelingGateMaximumAt = gateAt,
            Noise = NoiseOf(analyser),
        };
    }

    private static PulseEdge ToPulseEdge(Record record, GateEdge edge) =>
        new(record.TimeAt(edge.At), record.TimeAt(edge.Departure));

    private static PulseEdge? ToPulseEdge(Record record, GateEdge? edge) =>
        edge is { } present ? ToPulseEdge(record, present) : null;

    private static double? Value(Reading reading) => reading.HasValue ? reading.Value : null;

    private static double? GateEdge(Analyser analyser)
    {
        if (analyser.Train.Levels is not { } levels)
        {
            return null;
        }

        double? slowest = null;
        IReadOnlyList<GateEdge> edges = analyser.Train.Edges;
        for (int i = 0; i < edges.Count; i++)
        {
            double end = i + 1 < edges.Count ? edges[i + 1].Departure : analyser.Record.Last;
            double? duration = GateEdges.Duration(
                analyser.Record[Channel.VgsLow], levels, analyser.Train.GateHysteresis, edges[i], end);
            slowest = duration > (slowest ?? 0) ? duration : slowest;
        }

        return slowest * analyser.Record.SampleInterval;
    }

    private static double? BusBefore(Analyser analyser, GateEdge? edge, bool orVds)
    {
        if (edge is not { } present)
        {
            return null;
        }

        Reading bus = analyser.MeanBefore(Channel.Vbus, present.Departure);
        return Value(bus.HasValue || !orVds ? bus : analyser.MeanBefore(Channel.VdsLow, present.Departure));
    }

    private static double? MeanBeforeOn1(Analyser analyser, Record record, Channel role) =>
        analyser.Train.On1 is { Departure: >= 1 } on1 && record.Has(role)
            ? Integral.Mean(record[role], 0, on1.Departure)
            : null;

    private static double? CurrentBeforeOn1(Analyser analyser, Waveform recorded, AnalysisSettings settings)
    {
        Channel channel = analyser.Record.Measured(Channel.IdLow);
        double gain = settings.Corrections.TryGetValue(channel, out ChannelCorrection? stated) ? stated.Gain : 1;
        return analyser.Train.On1 is { Departure: >= 1 } on1 && recorded.Has(channel)
            ? Integral.Mean(recorded.At(channel).All, 0, on1.Departure) / gain
            : null;
    }

    /// <summary>The largest vds with the gate on: from 25 % of a pulse to the departure of its end.</summary>
    private static (double? Volts, double? Time) OnStateMaximum(Analyser analyser)
    {
        if (!analyser.Record.Has(Channel.VdsLow))
        {
            return (null, null);
        }

        ReadOnlySpan<double> vds = analyser.Record[Channel.VdsLow].Values;
        int most = -1;
        Search(vds, analyser.Train.On1, analyser.Train.Off1, ref most);
        Search(vds, analyser.Train.On2, analyser.Train.Off2, ref most);
        return most < 0 ? (null, null) : (vds[most], analyser.Record.TimeAt(most));
    }

    private static void Search(ReadOnlySpan<double> vds, GateEdge? on, GateEdge? off, ref int most)
    {
        if (on is null && off is null)
        {
            return;
        }

        double start = on?.At ?? 0;
        double end = off?.At ?? (vds.Length - 1);
        int last = (int)Math.Min(off?.Departure ?? end, vds.Length - 1);
        for (int i = (int)Math.Ceiling(start + (OnStateFrom * (end - start))); i <= last; i++)
        {
            most = most < 0 || vds[i] > vds[most] ? i : most;
        }
    }

    /// <summary>A false turn-on shows as a gate above its threshold while the diode recovers.</summary>
    private static (double? Volts, double? Time) FreewheelingGateMaximum(Analyser analyser)
    {
        if (!analyser.Record.Has(Channel.VgsHigh) || analyser.Train.On2 is not { } on2 || !analyser.OnCurrent.HasValue)
        {
            return (null, null);
        }

        Instant end = RecoveryTime.ChordEnd(analyser.Recovery(byLoadLine: true));
        if (end.Reason is not null)
        {
            return (null, null);
        }

        ReadOnlySpan<double> gate = analyser.Record[Channel.VgsHigh].Values;
        int most = (int)Math.Ceiling(on2.Departure);
        int last = (int)Math.Min(analyser.Record.Last, Math.Ceiling(end.At + analyser.RecoveryOrigin));
        for (int i = most + 1; i <= last; i++)
        {
            most = gate[i] > gate[most] ? i : most;
        }

        return (gate[most], analyser.Record.TimeAt(most));
    }

    private static double? OnStateHysteresis(Analyser analyser)
    {
        if (!analyser.Record.Has(Channel.VdsLow))
        {
            return null;
        }

        double noise = 3 * analyser.Train.Sigma(Channel.VdsLow);
        bool known = analyser.Bus.HasValue && analyser.OnStateOff1.HasValue;
        return known ? Math.Max(noise, 0.01 * (analyser.Bus.Value - analyser.OnStateOff1.Value)) : noise;
    }

    private static Dictionary<Channel, double> NoiseOf(Analyser analyser)
    {
        Dictionary<Channel, double> noise = [];
        foreach (Channel role in ChannelNames.All)
        {
            if (analyser.Record.Has(role))
            {
                noise[analyser.Record.Measured(role)] = analyser.Train.Sigma(role);
            }
        }

        return noise;
    }
}
