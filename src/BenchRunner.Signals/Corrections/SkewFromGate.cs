using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Corrections;

/// <summary>Skew of the switch's gate voltage against its drain's voltage, from what the drain's ringing displaces in
/// the gate.</summary>
/// <remarks>
/// <para>After a turn-off the channel is closed and the gate's loop is linear: vgs = Voff + b e^(−t/τ) + the answer to
/// the drain, which comes through the gate-drain capacitance (with v) and through the source's inductance that gate and
/// drain share (with di/dt, and i = C dv/dt: with d²v/dt²), both behind resistance and capacitance of the gate: a
/// high-pass of τ. Where v rings with the pole p, the gate rings with λ p² pτ/(1 + pτ), later by the skew; λ above 0 for
/// the inductance's part, the larger one. Both channels are fitted with the poles of the drain's ring (ring/fit), and
/// the gate with its own decay, which gives τ: no device parameter and no derivative of samples is needed. (Derived
/// here from the circuit; no source.)</para>
/// <para>A phase is ambiguous by whole periods. The jump of the gate as the drain's voltage dips at turn-on tells the
/// period (<see cref="GateDip"/>), and by its sign that the source's inductance is the larger part; where it tells
/// neither there is a reason. A skew beyond 1.5 periods is not looked for: state what is known of it first.</para>
/// <para>On records of 0.5 % noise at 1 GS/s twice the stated uncertainty (0.15 to 0.3 samples) held at least 95 % of 200
/// draws in three circuits; in one of 20 V with a gate resistor of 33 Ohm the gate shows no answer at turn-on: a
/// reason. A fit of the plateau itself (a charge that is any smooth function of v) was tried and tells nothing: where v
/// only rises, that function takes up any skew.</para>
/// <para>What can go wrong: a gate loop of much inductance turns the phase by more than is allowed for (0.15 rad); a
/// source pin of its own for the gate leaves nothing to see; a stray coupling from probe to probe looks like the
/// drain's answer.</para>
/// </remarks>
public static class SkewFromGate
{
    // By how much the best period must be more likely than any other, as a logarithm: 400 times.
    private const double Clear = 6;

    // What the gate loop's inductance and the part of the gate-drain capacitance turn the phase by at most, rad.
    private const double Turned = 0.15;

    // From the first maximum of the drain to the fit's start, in periods: the first way gives the skew, the others what
    // the choice costs.
    private static readonly double[] _starts = [GateWindow.Start, GateWindow.Start + 0.25, GateWindow.Start + 0.5];

    /// <summary>Estimates what is left of the skew after the stated corrections.</summary>
    /// <param name="waveform">The record as it came; not modified.</param>
    /// <param name="settings">What is taken as given; the skews that it states are undone first.</param>
    /// <returns>By how much the switch's gate voltage is later than its drain's (negative: earlier), or a
    /// reason.</returns>
    /// <exception cref="ArgumentException">A stated correction cannot be undone.</exception>
    /// <remarks>The uncertainty joins the noise of both channels in the colour of the residuals, how far the skew moves
    /// when the fit starts later, and a phase that the model leaves open.</remarks>
    public static SkewEstimate Estimate(Waveform waveform, AnalysisSettings settings)
    {
        ArgumentNullException.ThrowIfNull(waveform);
        ArgumentNullException.ThrowIfNull(settings);
        AnalysisResult said = WaveformAnalysis.Analyse(
            waveform,
            settings with { EveryDefinition = false, Quantities = new HashSet<string> { "bus_voltage" } },
            out Waveform traces);
        (Channel gate, Channel drain) = settings.Position == DevicePosition.High
            ? (Channel.VgsHigh, Channel.VdsHigh)
            : (Channel.VgsLow, Channel.VdsLow);
        if (!traces.Has(gate) || !traces.Has(drain))
        {
            return SkewEstimate.None($"{gate.Name()} and {drain.Name()} are not both measured");
        }

        QuantityValue busVoltage = said.Quantities.First(value => value.Quantity == "bus_voltage");
        if (said.Train.Off1 is not { } off1 || said.Train.On2 is not { } on2 || busVoltage.Value is not { } bus)
        {
            return SkewEstimate.None(busVoltage.Reason ?? "off1 or on2 is outside the record");
        }

        double dt = traces.SampleInterval;
        double[] vds = traces[drain].ToArray(), vgs = traces[gate].ToArray();
        if (!Array.TrueForAll(vds, double.IsFinite) || !Array.TrueForAll(vgs, double.IsFinite))
        {
            return SkewEstimate.None("clipped samples");
        }

        double turnOff = (off1.Departure - traces.TimeOrigin) / dt, turnOn = (on2.Departure - traces.TimeOrigin) / dt;
        if (GateWindow.Find(vds, dt, said.Train.Noise[drain], (int)turnOff, (int)turnOn) is not { } window)
        {
            return SkewEstimate.None("no ringing of the drain after off1");
        }

        GateRing first = At(_starts[0], 0);
        if (first.Reason is { } none)
        {
            return SkewEstimate.None(none);
        }

        GateDip dip = new(vds, vgs, turnOn, Below(vds, (int)turnOn, bus / 2));
        if (Choose(dip, first.Skew, window.Period) is not { } skew)
        {
            return SkewEstimate.None("the gate's answer at turn-on does not tell the period of its ringing");
        }

        List<GateRing> ways = [];
        foreach (double start in _starts)
        {
            GateRing way = At(start, (int)Math.Round(skew));
            if (way.Reason is { } reason)
            {
                return SkewEstimate.None(reason);
            }

            ways.Add(way with { Skew = Nearest(way.Skew, skew, window.Period) });
        }

        return Join(ways, window.Period, dt);

        GateRing At(double start, int late) => GateRing.Of(
            vds, vgs, window.Poles, (int)Math.Ceiling(window.Peak + (start * window.Period)), window.To, late);
    }

    private static SkewEstimate Join(List<GateRing> ways, double period, double dt)
    {
        GateRing first = ways[0];
        double apart = ways.Max(way => Math.Abs(way.Skew - first.Skew));
        double turned = Turned / Math.Sqrt(3) * period / (2 * Math.PI);
        double all = Math.Sqrt((first.Uncertainty * first.Uncertainty) + (apart * apart) + (turned * turned));
        return new SkewEstimate(first.Skew * dt, all * dt, null, null);
    }

    private static double Nearest(double skew, double other, double period) =>
        skew + (period * Math.Round((other - skew) / period));

    /// <summary>The skew of the period that the turn-on allows; null where it allows several, or none.</summary>
    private static double? Choose(GateDip dip, double found, double period)
    {
        double nearest = Nearest(found, 0, period), chosen = 0, best = 0, second = 0;
        foreach (double skew in (double[])[nearest - period, nearest, nearest + period])
        {
            double gain = dip.Gain(skew);
            (chosen, best, second) = gain > best ? (skew, gain, best) : (chosen, best, Math.Max(second, gain));
        }

        return best - second > Clear ? chosen : null;
    }

    private static int Below(double[] samples, int from, double level)
    {
        while (from < samples.Length - 1 && samples[from] > level)
        {
            from++;
        }

        return from;
    }
}
