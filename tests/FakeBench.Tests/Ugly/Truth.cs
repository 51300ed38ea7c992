using FakeBench.Physics;

namespace FakeBench.Tests.Ugly;

/// <summary>Quantities of a noiseless train, by plain walks over finely spaced samples that share nothing with the program
/// under test.</summary>
/// <remarks>Definitions as in docs/quantities.md; the load's current is the load's, not a line.</remarks>
internal static class Truth
{
    /// <summary>Values by the quantity's name.</summary>
    public static IReadOnlyDictionary<string, double> Of(TrainTrajectory fine, PulseTrain train)
    {
        double[] vgs = fine[Signal.VgsLow], vds = fine[Signal.VdsLow], id = fine[Signal.IdLow];
        double[] bus = fine[Signal.Vbus], load = fine[Signal.ILoad], high = fine[Signal.VdsHigh];
        int At(double time) => Math.Clamp((int)Math.Round((time - fine.Start) / fine.Interval), 0, fine.Points - 1);
        double Gate(double share) => train.GateOff + (share * (train.GateOn - train.GateOff));
        Dictionary<string, double> truth = [];
        bool hasOff2 = fine.Start + (fine.Interval * fine.Points) > train.Off2 + 1e-7;

        int off = Falls(vgs, At(train.Off1), Gate(0.5)), leaves = Falls(vgs, At(train.Off1), Gate(0.9));
        int begins = Rises(vgs, At(train.On2), Gate(0.1));
        double level = Mean(bus, begins - At(fine.Start + 200e-9), begins);
        double iOff = load[off];
        double onState = Mean(vds, leaves - At(fine.Start + (train.FirstPulse / 10)), leaves);
        truth["bus_voltage"] = level;
        truth["i_off"] = iOff;
        truth["vds_on"] = onState;
        double p10 = onState + (0.1 * (level - onState)), p90 = onState + (0.9 * (level - onState));

        int rise = Rises(vds, leaves, p10), ends = Falls(id, rise, 0.1 * iOff);
        truth["eoff"] = Integral(fine, vds, id, rise, ends);
        truth["tf"] = (Rises(vds, leaves, p90) - rise) * fine.Interval;
        truth["td_off"] = (rise - leaves) * fine.Interval;
        truth["vds_peak_off"] = vds[off..At(train.On2)].Max();

        // At turn-on the inductive dip may meet a level before the voltage falls for good: the last crossing counts.
        int middle = Falls(vds, begins, onState + (0.5 * (level - onState)));
        double iOn = load[middle];
        truth["i_on"] = iOn;
        int current = Rises(id, begins, 0.1 * iOn), low = Falls(vds, begins, p10);
        truth["eon"] = Integral(fine, vds, id, current, low);
        truth["didt_on"] = 0.8 * iOn / ((Rises(id, begins, 0.9 * iOn) - current) * fine.Interval);
        int end = hasOff2 ? At(train.Off2) : fine.Points;
        truth["id_peak_on"] = id[begins..end].Max();
        truth["vds_high_peak_1"] = high[begins..Math.Min(end, begins + At(fine.Start + 60e-9))].Max();
        Recovery(truth, fine, id, load, begins, middle);
        return truth;
    }

    /// <summary>Reverse current above the load's, which is that at the middle of the fall before it.</summary>
    private static void Recovery(
        Dictionary<string, double> truth, TrainTrajectory fine, double[] id, double[] load, int begins, int middle)
    {
        double[] irr = [.. id.Select((current, i) => current - load[Math.Max(i, middle)])];
        int start = Rises(irr, begins, 0);
        int peak = start;
        for (int i = start; i < start + (int)(60e-9 / fine.Interval); i++)
        {
            peak = irr[i] > irr[peak] ? i : peak;
        }

        double irm = irr[peak];
        int at90 = Falls(irr, peak, 0.9 * irm), at25 = Falls(irr, peak, 0.25 * irm);
        int end = (int)Math.Round(at25 + (0.25 / 0.65 * (at25 - at90)));
        truth["irm"] = irm;
        truth["trr"] = (end - start) * fine.Interval;
        double charge = 0;
        for (int i = start; i < end; i++)
        {
            charge += 0.5 * (irr[i] + irr[i + 1]) * fine.Interval;
        }

        truth["qrr"] = charge;
    }

    private static double Integral(TrainTrajectory fine, double[] vds, double[] id, int from, int to)
    {
        double sum = 0;
        for (int i = from; i < to; i++)
        {
            sum += 0.5 * ((vds[i] * id[i]) + (vds[i + 1] * id[i + 1])) * fine.Interval;
        }

        return sum;
    }

    private static int Rises(double[] samples, int from, double level)
    {
        int i = from;
        while (i < samples.Length - 1 && samples[i] < level)
        {
            i++;
        }

        return i;
    }

    private static int Falls(double[] samples, int from, double level)
    {
        int i = from;
        while (i < samples.Length - 1 && samples[i] > level)
        {
            i++;
        }

        return i;
    }

    private static double Mean(double[] samples, int from, int to) => samples[from..to].Average();
}
