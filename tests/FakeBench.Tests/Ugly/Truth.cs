using FakeBench.Physics;

namespace FakeBench.Tests.Ugly;

/// <summary>Quantities of a noiseless train, by plain walks over finely spaced samples that share nothing with the
/// program under test.</summary>
/// <remarks>Definitions as in docs/quantities.md; the load's current before the second turn-on is the load's own, and
/// rises from the middle of the voltage's fall on as it does later in the pulse.</remarks>
internal sealed class Truth
{
    private readonly TrainTrajectory _fine;
    private readonly PulseTrain _train;
    private readonly Dictionary<string, double> _values = [];
    private readonly double[] _vgs, _vds, _id, _load;

    private Truth(TrainTrajectory fine, PulseTrain train)
    {
        (_fine, _train) = (fine, train);
        (_vgs, _vds, _id) = (fine[Signal.VgsLow], fine[Signal.VdsLow], fine[Signal.IdLow]);
        _load = fine[Signal.ILoad];
    }

    /// <summary>Values by the quantity's name.</summary>
    public static IReadOnlyDictionary<string, double> Of(TrainTrajectory fine, PulseTrain train)
    {
        Truth truth = new(fine, train);
        truth.Form();
        return truth._values;
    }

    private void Form()
    {
        double dt = _fine.Interval;
        double[] bus = _fine[Signal.Vbus], high = _fine[Signal.VdsHigh];
        double off = Falls(_vgs, At(_train.Off1), Gate(0.5)), leaves = Falls(_vgs, At(_train.Off1), Gate(0.9));
        double begins = Rises(_vgs, At(_train.On2), Gate(0.1));
        double level = Mean(bus, begins - (200e-9 / dt), begins);
        double iOff = _load[(int)off];
        double on = Mean(_vds, leaves - (_train.FirstPulse / 10 / dt), leaves);
        double Level(double share) => on + (share * (level - on));
        (_values["bus_voltage"], _values["i_off"], _values["vds_on"]) = (level, iOff, on);

        double rise = Rises(_vds, leaves, Level(0.1)), ends = Falls(_id, rise, 0.1 * iOff);
        _values["eoff"] = Integral(_vds, _id, rise, ends);
        _values["tf"] = (Rises(_vds, leaves, Level(0.9)) - rise) * dt;
        _values["td_off"] = (rise - leaves) * dt;
        _values["vds_peak_off"] = _vds[(int)off..(int)begins].Max();

        double middle = Falls(_vds, begins, Level(0.5));
        double iOn = _load[(int)begins - 1];
        double current = Rises(_id, begins, 0.1 * iOn);
        int end = (int)Math.Min(_fine.Points - 1, At(_train.Off2));
        _values["i_on"] = iOn;
        _values["eon"] = Integral(_vds, _id, current, Falls(_vds, begins, Level(0.1)));
        _values["didt_on"] = 0.8 * iOn / ((Rises(_id, begins, 0.9 * iOn) - current) * dt);
        _values["id_peak_on"] = _id[(int)begins..end].Max();
        _values["vds_high_peak_1"] = high[(int)begins..(int)(begins + (60e-9 / dt))].Max();
        Recovery(begins, middle, iOn);
    }

    private void Recovery(double begins, double middle, double iOn)
    {
        double dt = _fine.Interval;
        int from = (int)(middle + (0.6e-6 / dt)), to = (int)(middle + (1.4e-6 / dt));
        double slope = (_load[to] - _load[from]) / (to - from);
        double[] irr = [.. _id.Select((current, i) => current - iOn - (slope * Math.Max(0, i - middle)))];
        double start = Rises(irr, begins, 0);
        int peak = (int)start;
        for (int i = peak; i < start + (60e-9 / dt); i++)
        {
            peak = irr[i] > irr[peak] ? i : peak;
        }

        double irm = irr[peak];
        double at90 = Falls(irr, peak, 0.9 * irm), at25 = Falls(irr, peak, 0.25 * irm);
        double end = at25 + (0.25 / 0.65 * (at25 - at90));
        _values["irm"] = irm;
        _values["trr"] = (end - start) * dt;
        _values["qrr"] = Integral(irr, null, start, end);
    }

    private double At(double time) => Math.Clamp((time - _fine.Start) / _fine.Interval, 0, _fine.Points - 1);

    private double Gate(double share) => _train.GateOff + (share * (_train.GateOn - _train.GateOff));

    /// <summary>The integral of a signal, or of the product of two, with its part-samples, in the signal's unit
    /// times s.</summary>
    private double Integral(double[] one, double[]? other, double from, double to)
    {
        double Product(double at) => Value(one, at) * (other is null ? 1 : Value(other, at));
        double sum = 0;
        for (double at = from; at < to;)
        {
            double next = Math.Min(to, Math.Floor(at) + 1);
            sum += 0.5 * (Product(at) + Product(next)) * (next - at);
            at = next;
        }

        return sum * _fine.Interval;
    }

    private static double Value(double[] samples, double at)
    {
        int i = (int)Math.Min(at, samples.Length - 2);
        return samples[i] + ((at - i) * (samples[i + 1] - samples[i]));
    }

    private static double Rises(double[] samples, double from, double level) => Crosses(samples, from, level, 1);

    private static double Falls(double[] samples, double from, double level) => Crosses(samples, from, level, -1);

    private static double Crosses(double[] samples, double from, double level, int sign)
    {
        for (int i = (int)Math.Ceiling(from); i < samples.Length - 1; i++)
        {
            if (sign * (samples[i] - level) <= 0 && sign * (samples[i + 1] - level) > 0)
            {
                return i + ((level - samples[i]) / (samples[i + 1] - samples[i]));
            }
        }

        return samples.Length - 1;
    }

    private static double Mean(double[] samples, double from, double to) => samples[(int)from..(int)to].Average();
}
