using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Switching;

/// <summary>Inductance of the commutation loop outside the voltage probes, H: <c>loop_inductance</c>, definition
/// <c>loop/flux</c>.</summary>
public static class LoopInductance
{
    /// <summary>The flux that the loop takes up while the current rises, over the current's change.</summary>
    /// <param name="turnOn">The turn-on; its bus voltage, current and levels.</param>
    /// <param name="vdsHigh">Voltage of the other position, V, on the same grid; empty: not measured.</param>
    /// <param name="forwardVoltage">Stated forward voltage of the freewheeling diode, V, used where
    /// <paramref name="vdsHigh"/> is empty; null: not stated.</param>
    /// <param name="shuntResistance">Resistance of the current shunt, Ω; 0 where it is not inside the loop.</param>
    /// <returns>Inductance, H, over the interval from 10 % to 90 % of i_on.</returns>
    /// <remarks>
    /// L = ∫ (bus − vds_low − vds_high − R id) dt / Δid. An integral, since a fit of voltage against di/dt fails under
    /// noise. The bus voltage is the one before the edge: the drop on the capacitor's own inductance belongs to the
    /// loop.
    /// </remarks>
    /// <example>100 V missing for 16 ns while the current rises by 80 A: 20 nH.</example>
    public static Reading Form(
        in SwitchingEvent turnOn, Samples vdsHigh, double? forwardVoltage, double shuntResistance)
    {
        Instant start = turnOn.CurrentAt(0.1);
        Instant end = turnOn.CurrentAt(0.9);
        if ((turnOn.Bus.Because("bus_voltage").Reason ?? start.Reason ?? end.Reason) is { } reason)
        {
            return Reading.None(reason);
        }

        if (vdsHigh.Length == 0 && forwardVoltage is null)
        {
            return Reading.None("vds_high is not measured and the diode's forward voltage is not stated");
        }

        if (!(end.At > start.At))
        {
            return Reading.None("the levels are crossed in the wrong order");
        }

        double length = end.At - start.At;
        double high = vdsHigh.Length == 0 ? -forwardVoltage!.Value * length : Integral.Of(vdsHigh, start.At, end.At);
        double flux = (turnOn.Bus.Value * length)
            - Integral.Of(turnOn.Vds, start.At, end.At)
            - high
            - (shuntResistance * Integral.Of(turnOn.Id, start.At, end.At));
        double change = Integral.At(turnOn.Id.Values, end.At) - Integral.At(turnOn.Id.Values, start.At);
        return Reading.Of(flux * turnOn.SampleInterval / change, start.At, end.At);
    }
}
