using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Acceptance.Plans;

/// <summary>How warm a pulse train makes the junctions above the plate.</summary>
/// <remarks>
/// Losses are rectangles of power in time; the rise at a moment is the sum of P · [Zth(t − start) − Zth(t − end)] over
/// them (superposition, common practice for transient thermal impedance), looked at the end of each. Switching energies
/// are the upper limits that the sequence states on <c>eon</c>, <c>eoff</c> and <c>err</c>, else ½ V I times two
/// fastest edges (nothing for <c>err</c>); they are lost at the power V I. The second turn-off and the freewheeling after
/// it are part of the train; so is what the mean power of repeated trains leaves.
/// </remarks>
internal static class JunctionHeating
{
    private const int FreewheelingSteps = 16;

    private readonly record struct Loss(double Start, double End, double Power)
    {
        public double Energy => Power * (End - Start);
    }

    /// <summary>Rise of the junctions of both places; null where the sequence states no thermal impedance.</summary>
    /// <param name="point">The operating point.</param>
    /// <param name="train">What its train does.</param>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    public static JunctionRise? Rise(OperatingPoint point, PulseTrain train, Sequence sequence, Bench bench)
    {
        IReadOnlyList<ThermalPoint> impedance = sequence.ThermalImpedance;
        if (impedance.Count == 0)
        {
            return null;
        }

        double off1 = train.FirstPulse ?? (bench.LoadInductance * point.LoadCurrent / point.BusVoltage);
        double on2 = off1 + point.Gap;
        double off2 = on2 + point.SecondPulse;
        double period = Math.Max(point.RepeatEvery, off2 + train.LoadDecay);
        double firing = Warmest(SwitchLosses(point, train, sequence, off1, on2, off2), impedance, period);
        double freewheeling = Warmest(DiodeLosses(point, train, sequence, off1, on2, off2), impedance, period);
        return HalfBridge.FiresHigh(sequence)
            ? new JunctionRise(Low: freewheeling, High: firing)
            : new JunctionRise(Low: firing, High: freewheeling);
    }

    private static List<Loss> SwitchLosses(
        OperatingPoint point, PulseTrain train, Sequence sequence, double off1, double on2, double off2)
    {
        double onVoltage = sequence.Expected.OnVoltage;
        double overlap = sequence.Expected.FastestEdge;
        double rated = point.BusVoltage * point.LoadCurrent;
        double ratio = train.Off2Current / point.LoadCurrent;
        double eon = Stated(sequence, point, "eon") ?? (rated * overlap);
        double eoff = Stated(sequence, point, "eoff") ?? (rated * overlap);
        return
        [
            new Loss(0, off1, onVoltage * point.LoadCurrent / 2),
            new Loss(off1, off1 + (eoff / rated), rated),
            new Loss(on2, on2 + (eon / rated), rated),
            new Loss(on2, off2, onVoltage * (train.OnCurrent + train.Off2Current) / 2),
            new Loss(off2, off2 + (eoff / rated), rated * ratio),
        ];
    }

    private static List<Loss> DiodeLosses(
        OperatingPoint point, PulseTrain train, Sequence sequence, double off1, double on2, double off2)
    {
        double forward = sequence.Expected.ForwardVoltage;
        double rated = point.BusVoltage * point.LoadCurrent;
        var losses = new List<Loss> { new(off1, on2, forward * point.LoadCurrent) };
        if (Stated(sequence, point, "err") is { } err)
        {
            losses.Add(new Loss(on2, on2 + (err / rated), rated));
        }

        double step = train.LoadDecay / FreewheelingSteps;
        for (int i = 0; i < FreewheelingSteps; i++)
        {
            double left = 1 - ((i + 0.5) / FreewheelingSteps);
            losses.Add(new Loss(off2 + (i * step), off2 + ((i + 1) * step), forward * train.Off2Current * left));
        }

        return losses;
    }

    private static double? Stated(Sequence sequence, OperatingPoint point, string quantity) =>
        sequence.Limits.FirstOrDefault(limit => limit.Quantity == quantity && limit.At == point.Name)?.Upper;

    private static double Warmest(List<Loss> losses, IReadOnlyList<ThermalPoint> impedance, double period)
    {
        double warmest = 0;
        foreach (Loss moment in losses)
        {
            double rise = 0;
            foreach (Loss loss in losses)
            {
                double since = TransientImpedance.At(impedance, moment.End - loss.Start);
                double after = TransientImpedance.At(impedance, moment.End - loss.End);
                rise += loss.Power * (since - after);
            }

            warmest = Math.Max(warmest, rise);
        }

        double energy = 0;
        foreach (Loss loss in losses)
        {
            energy += loss.Energy;
        }

        return warmest + (energy / period * impedance[^1].Impedance);
    }
}
