using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Analysis;

namespace BenchRunner.Acceptance.Plans;

/// <summary>
/// What a pulse train at one operating point does to load, bank and device, from the files alone. All values SI.
/// </summary>
internal sealed record PulseTrain
{
    /// <summary>Width of the first pulse, s; null where the target current is never reached.</summary>
    public required double? FirstPulse { get; init; }

    /// <summary>Droop of the bus over the first pulse, 1.</summary>
    public required double Droop { get; init; }

    /// <summary>Load current at the second turn-on, A.</summary>
    public required double OnCurrent { get; init; }

    /// <summary>Load current at the second turn-off, A.</summary>
    public required double Off2Current { get; init; }

    /// <summary>Peak voltage at the second turn-off, V.</summary>
    public required double Off2PeakVoltage { get; init; }

    /// <summary>Time from the second turn-off until the inductor has no current, s.</summary>
    public required double LoadDecay { get; init; }

    /// <summary>Time that the supply needs to bring back what the train took, s.</summary>
    public required double Recharge { get; init; }

    /// <summary>Works the train out.</summary>
    /// <param name="point">The operating point.</param>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    /// <remarks>
    /// The on state counts as a resistance, an IGBT's as a constant drop. Off2 is stated high on purpose: i_on + V t2/L
    /// without droop, and the peak V + L_loop · i/t_edge with the fastest edge expected.
    /// </remarks>
    public static PulseTrain Of(OperatingPoint point, Sequence sequence, Bench bench)
    {
        double inductance = bench.LoadInductance;
        double largest = sequence.OperatingPoints.Max(other => other.LoadCurrent);
        bool constantDrop = sequence.Kind == DeviceKind.Igbt;
        double onResistance = constantDrop ? 0 : sequence.Expected.OnVoltage / largest;
        var ramp = new ChargingRamp(
            Math.Max(point.BusVoltage - (constantDrop ? sequence.Expected.OnVoltage : 0), 0.01 * point.BusVoltage),
            inductance,
            bench.LoadResistance + onResistance + (bench.Shunt?.Resistance ?? 0),
            bench.BusCapacitance);
        double? first = ramp.TimeTo(point.LoadCurrent);
        double ideal = inductance * point.LoadCurrent / point.BusVoltage;
        double forward = sequence.Expected.ForwardVoltage;
        double on2 = Math.Max(Freewheeling(point.LoadCurrent, point.Gap, forward, bench), 0);
        double off2 = on2 + (point.BusVoltage * point.SecondPulse / inductance);
        double taken = (0.5 * point.LoadCurrent * (first ?? ideal)) + (0.5 * (on2 + off2) * point.SecondPulse);
        return new PulseTrain
        {
            FirstPulse = first,
            Droop = ramp.DroopAt(first ?? ideal) / point.BusVoltage,
            OnCurrent = on2,
            Off2Current = off2,
            Off2PeakVoltage = point.BusVoltage + (bench.LoopInductance * off2 / sequence.Expected.FastestEdge),
            LoadDecay = Extinction(off2, forward, bench),
            Recharge = taken / bench.ChargingCurrent,
        };
    }

    /// <summary>Load current after a time of freewheeling, A: L di/dt = −(V_F + R i).</summary>
    private static double Freewheeling(double current, double time, double forward, Bench bench)
    {
        double resistance = bench.LoadResistance;
        if (resistance <= 0)
        {
            return current - (forward * time / bench.LoadInductance);
        }

        double rest = forward / resistance;
        return ((current + rest) * Math.Exp(-resistance * time / bench.LoadInductance)) - rest;
    }

    /// <summary>Time until the freewheeling current is zero, s: L/R · ln(1 + R i/V_F), or L i/V_F.</summary>
    private static double Extinction(double current, double forward, Bench bench)
    {
        double resistance = bench.LoadResistance;
        return resistance <= 0
            ? bench.LoadInductance * current / forward
            : bench.LoadInductance / resistance * Math.Log(1 + (resistance * current / forward));
    }
}
