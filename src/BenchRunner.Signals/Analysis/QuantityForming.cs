using BenchRunner.Signals.Energy;
using BenchRunner.Signals.Peaks;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Recovery;
using BenchRunner.Signals.Ringing;
using BenchRunner.Signals.RingWindows;
using BenchRunner.Signals.Switching;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Analysis;

/// <summary>From a quantity's name and definition to the kernel that forms it.</summary>
internal sealed class QuantityForming(Analyser analyser, AnalysisSettings settings)
{
    /// <summary>Forms a quantity.</summary>
    /// <param name="quantity">Its name.</param>
    /// <param name="rule">The definition's ID without a route.</param>
    /// <param name="byLoadLine">The route to the diode's current.</param>
    public Reading Form(string quantity, string rule, bool byLoadLine) => quantity switch
    {
        "vgs_on" => analyser.Train.GateOn,
        "vgs_off" => analyser.Train.GateOff,
        "bus_voltage" => analyser.BusFor(rule),
        "bus_droop" => Droop(),
        "ramp_slope" => analyser.Ramp.Slope,
        "ramp_straightness" => analyser.Ramp.Straightness,
        "i_off" => analyser.Ramp.OffCurrent,
        "i_on" => analyser.OnCurrent,
        "td_on" or "tr" or "eon" or "dvdt_on" or "didt_on" or "id_peak_on" or "loop_inductance" =>
            analyser.Train.On2 is null ? analyser.Outside("on2") : TurnOn(quantity, rule),
        "vds_on" or "td_off" or "tf" or "eoff" or "dvdt_off" or "didt_off" or "vds_peak_off" or "vds_overshoot_off" =>
            analyser.Train.Off1 is null ? analyser.Outside("off1") : TurnOff(quantity, rule),
        "vds_high_peak_1" => HighPeak(1),
        "vds_high_peak_2" => HighPeak(2),
        "vds_high_peak_3" => HighPeak(3),
        "ring_frequency" => Ring(analyser.RingOn, "on2", m => m.Frequency),
        "ring_damping" => Ring(analyser.RingOn, "on2", m => m.Damping),
        "ring_amplitude" => Ring(analyser.RingOn, "on2", m => m.Amplitude),
        "ring_q" => Ring(analyser.RingOn, "on2", m => m.Quality),
        "ring_frequency_id" => Ring(analyser.RingId, "on2", m => m.Frequency),
        "ring_damping_id" => Ring(analyser.RingId, "on2", m => m.Damping),
        "ring_frequency_off" => Ring(analyser.RingOff, "off1", m => m.Frequency),
        "ring_damping_off" => Ring(analyser.RingOff, "off1", m => m.Damping),
        _ => analyser.Train.On2 is null ? analyser.Outside("on2") : Recovery(quantity, rule, byLoadLine),
    };

    /// <summary>How an energy changes with the skew of its current, W; null for what is no energy.</summary>
    /// <param name="quantity">The quantity's name.</param>
    /// <param name="formed">Its reading, with a value.</param>
    /// <param name="byLoadLine">The route to the diode's current.</param>
    public double? PerSkew(string quantity, Reading formed, bool byLoadLine) => quantity switch
    {
        "eon" => PerSkew(analyser.TurnOn(analyser.OnCurrent), formed),
        "eoff" => PerSkew(analyser.TurnOff(), formed),
        "err" => SkewSensitivity.Form(
            Along(Channel.VdsHigh),
            analyser.Recovery(byLoadLine).Irr,
            analyser.Record.SampleInterval,
            formed.From - analyser.RecoveryOrigin,
            formed.To - analyser.RecoveryOrigin,
            fromMoves: true,
            toMoves: true),
        _ => null,
    };

    /// <summary>The current's 10 % begins eon and ends eoff; the other end is the voltage's.</summary>
    private static double PerSkew(in SwitchingEvent edge, Reading formed) => SkewSensitivity.Form(
        edge.Vds.Values,
        edge.Id.Values,
        edge.SampleInterval,
        formed.From,
        formed.To,
        fromMoves: edge.TurnsOn,
        toMoves: !edge.TurnsOn);

    private Reading TurnOn(string quantity, string rule)
    {
        SwitchingEvent edge = analyser.TurnOn(analyser.OnCurrent);
        return (quantity, rule) switch
        {
            ("td_on", _) when analyser.Train.IsDepartureInNoise => Reading.None("level within the noise"),
            ("td_on", "mos/10-90") => SwitchingTime.VoltageDelay(edge),
            ("td_on", "igbt/10-10") => SwitchingTime.CurrentDelay(edge),
            ("tr", "mos/90-10") => SwitchingTime.VoltageTransition(edge),
            ("tr", "igbt/10-90") => SwitchingTime.CurrentTransition(edge),
            ("eon", "e/10-10") => SwitchingEnergy.Form(edge, 0.10),
            ("eon", "e/10-2") => SwitchingEnergy.Form(edge, 0.02),
            ("dvdt_on", "slope/20-80") => SwitchingSlope.Voltage(edge, 0.2),
            ("dvdt_on", "slope/10-90") => SwitchingSlope.Voltage(edge, 0.1),
            ("didt_on", "slope/10-90") => SwitchingSlope.Current(edge),
            ("id_peak_on", "peak/raw") => TurnOnPeak.Raw(edge.Id.Values, edge.Departure, edge.End),
            ("id_peak_on", "peak/parabola-20") => edge.Current.HasValue
                ? Peak.TopFifth(edge.Id.Values, edge.Departure, edge.End, edge.Current.Value)
                : edge.Current.Because("i_on"),
            ("loop_inductance", "loop/flux") => Loop(edge),
            _ => Unknown(quantity, rule),
        };
    }

    /// <summary>vds_high is taken where it is measured, so the catalogue does not ask for it: a clipped one is seen
    /// here.</summary>
    private Reading Loop(in SwitchingEvent edge)
    {
        Reading inductance = LoopInductance.Form(
            edge, analyser.Record[Channel.VdsHigh], settings.ForwardVoltage, settings.Shunt?.Resistance ?? 0);
        return inductance.HasValue && analyser.Record.IsClipped(Channel.VdsHigh, inductance.From, inductance.To)
            ? Reading.None($"{analyser.Record.Measured(Channel.VdsHigh).Name()} is clipped")
            : inductance;
    }

    private Reading TurnOff(string quantity, string rule)
    {
        SwitchingEvent edge = analyser.TurnOff();
        return (quantity, rule) switch
        {
            ("vds_on", "levels/window") => analyser.OnStateOff1,
            ("td_off", "mos/90-10") => SwitchingTime.VoltageDelay(edge),
            ("td_off", "igbt/90-90") => SwitchingTime.CurrentDelay(edge),
            ("tf", "mos/10-90") => SwitchingTime.VoltageTransition(edge),
            ("tf", "igbt/90-10") => SwitchingTime.CurrentTransition(edge),
            ("eoff", "e/10-10") => SwitchingEnergy.Form(edge, 0.10),
            ("eoff", "e/10-2") => SwitchingEnergy.Form(edge, 0.02),
            ("dvdt_off", "slope/20-80") => SwitchingSlope.Voltage(edge, 0.2),
            ("dvdt_off", "slope/10-90") => SwitchingSlope.Voltage(edge, 0.1),
            ("didt_off", "slope/90-10") => SwitchingSlope.Current(edge),
            ("vds_peak_off", "peak/raw") => TurnOffPeak.Raw(edge.Vds.Values, edge.Departure, edge.End),
            ("vds_peak_off", "peak/parabola-20") => analyser.Bus.HasValue
                ? Peak.TopFifth(edge.Vds.Values, edge.Departure, edge.End, analyser.Bus.Value)
                : analyser.Bus.Because("bus_voltage"),
            ("vds_overshoot_off", "peak/raw") => Overshoot(edge),
            _ => Unknown(quantity, rule),
        };
    }

    private Reading Overshoot(in SwitchingEvent edge)
    {
        Reading peak = TurnOffPeak.Raw(edge.Vds.Values, edge.Departure, edge.End);
        if (analyser.Record.Has(Channel.Vbus))
        {
            return TurnOffPeak.Overshoot(peak, analyser.Bus);
        }

        Reading settled = analyser.RingOff is { Reason: null } ring
            ? TurnOffPeak.Settled(edge.Vds, ring.From, ring.To)
            : Reading.None(analyser.RingOff?.Reason ?? analyser.Bus.Reason ?? "no ringing to settle from");
        return TurnOffPeak.Overshoot(peak, settled);
    }

    private Reading Recovery(string quantity, string rule, bool byLoadLine)
    {
        if (byLoadLine && !analyser.OnCurrent.HasValue)
        {
            return analyser.OnCurrent.Because("i_on");
        }

        int origin = analyser.RecoveryOrigin;
        RecoveryEvent recovery = analyser.Recovery(byLoadLine);
        Reading reading = (quantity, rule) switch
        {
            ("irm", "peak/above-load") => RecoveryPeak.AboveLoad(recovery),
            ("irm", "peak/parabola-20") => RecoveryPeak.Parabola(recovery),
            ("trr", _) => RecoveryTime.Whole(recovery, End(recovery, rule, "trr")),
            ("ta", _) => RecoveryTime.Rise(recovery, End(recovery, rule, "trr")),
            ("tb", _) => RecoveryTime.Decay(recovery, End(recovery, rule, "trr")),
            ("softness", _) => RecoveryTime.Softness(recovery, End(recovery, rule, "trr")),
            ("qrr", "qrr/to-zero") => RecoveryCharge.UntilZero(recovery),
            ("qrr", _) => DefinitionId.WindowTime(rule) is { } time
                ? RecoveryCharge.OverTime(recovery, time)
                : RecoveryCharge.UntilEnd(recovery, End(recovery, rule, "qrr")),
            ("dirr_dt", "slope/90-25") => Fall(recovery, byLoadLine),
            ("dif_dt", "slope/50-50") => RecoverySlope.Commutation(
                recovery, Along(Channel.IdLow), analyser.OnCurrent),
            ("err", "e/recovery") => RecoveryEnergy.Form(
                Along(Channel.VdsHigh),
                recovery.Irr,
                recovery.SampleInterval,
                RecoveryCharge.UntilEnd(recovery, RecoveryTime.ChordEnd(recovery))),
            _ => Unknown(quantity, rule),
        };
        return reading.Shifted(origin);
    }

    /// <summary>The fall's levels are parts of the peak, which lies outside its interval and must not be clipped
    /// either.</summary>
    private Reading Fall(in RecoveryEvent recovery, bool byLoadLine)
    {
        Reading peak = analyser.Record.Unclipped(
            byLoadLine ? Channel.IdLow : Channel.IdHigh,
            RecoveryPeak.AboveLoad(recovery).Shifted(analyser.RecoveryOrigin));
        return peak.HasValue ? RecoverySlope.Fall(recovery) : peak.Because("irm");
    }

    private ReadOnlySpan<double> Along(Channel role) =>
        analyser.Record[role].Values.Slice(analyser.RecoveryOrigin, analyser.RecoveryLength);

    private static Instant End(in RecoveryEvent recovery, string rule, string family) => rule[family.Length..] switch
    {
        "/chord-90-25" => RecoveryTime.ChordEnd(recovery),
        "/fall-2" => RecoveryTime.FallEnd(recovery, 0.02),
        "/fall-5" => RecoveryTime.FallEnd(recovery, 0.05),
        "/fall-10" => RecoveryTime.FallEnd(recovery, 0.10),
        "/fall-25" => RecoveryTime.FallEnd(recovery, 0.25),
        _ => Instant.None($"no rule {rule}"),
    };

    private Reading HighPeak(int number) => analyser.Train.On2 is { } on2
        ? HighSidePeaks.Form(
            analyser.Record[Channel.VdsHigh].Values,
            analyser.Bus,
            analyser.Train.Sigma(Channel.VdsHigh),
            on2.Departure,
            analyser.EndOfOn2,
            number)
        : analyser.Outside("on2");

    private Reading Ring(RingWindow? window, string edge, Func<RingMode, double> value) =>
        window is not null ? window.Read(value)
        : !analyser.Bus.HasValue ? analyser.Bus.Because("bus_voltage")
        : analyser.Outside(edge);

    private Reading Droop()
    {
        if (analyser.Train.On1 is not { } on1 || analyser.Train.Off1 is not { } off1)
        {
            return analyser.Outside(analyser.Train.On1 is null ? "on1" : "off1");
        }

        return Levels.Droop.Form(
            analyser.MeanBefore(Channel.Vbus, on1.Departure), analyser.MeanBefore(Channel.Vbus, off1.Departure));
    }

    private static Reading Unknown(string quantity, string rule) =>
        Reading.None($"{quantity} has no definition {rule}");
}
