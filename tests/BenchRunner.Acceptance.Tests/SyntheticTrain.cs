using BenchRunner.Acceptance.Plans;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests;

/// <summary>
/// A pulse train drawn with straight lines, a damped cosine and seeded noise, as a scope of 12 bits records it. A
/// drawing, not a circuit: each property is one flaw that a test can give it. Times in s from the first 50 % crossing
/// of the gate.
/// </summary>
internal sealed record SyntheticTrain
{
    public double Bus { get; init; } = 600;

    public double DroopVolts { get; init; } = 3.2;

    public double Inductance { get; init; } = 120e-6;

    public double First { get; init; } = 8.03e-6;

    public double Gap { get; init; } = 6e-6;

    public double Second { get; init; } = 3e-6;

    public double GateOn { get; init; } = 18;

    public double GateOff { get; init; } = -4;

    /// <summary>Whether the gate has a third pulse in the gap.</summary>
    public bool ExtraPulse { get; init; }

    /// <summary>What the current probe makes of 1 A, A.</summary>
    public double CurrentGain { get; init; } = 1;

    /// <summary>Current before the train, A.</summary>
    public double CurrentBefore { get; init; }

    /// <summary>How much the ramp bends: i = s t (1 + bend (t/t1)^8).</summary>
    public double Bend { get; init; }

    /// <summary>A ramp that leaves its line and comes back: two periods of a sine over its length, A.</summary>
    public double Bulge { get; init; }

    public double OnVoltage { get; init; } = 1.1;

    public double HighGatePeak { get; init; } = -2;

    public double RecoveryCurrent { get; init; } = 40;

    public double RingDamping { get; init; } = 0.05;

    /// <summary>Noise over full scale, rms.</summary>
    public double Noise { get; init; } = 0.0005;

    public int Seed { get; init; } = 1;

    private const double GateEdge = 10e-9;
    private const double RingFrequency = 42e6;
    private const double Lag = 20e-9;
    private const double Step = 20e-9;

    private double Off1 => First;

    private double On2 => First + Gap;

    private double Off2 => First + Gap + Second;

    private double Slope => Bus / Inductance;

    private double LoadAtOff1 => Load(Off1);

    /// <summary>The traces of this train in planned ranges.</summary>
    public IReadOnlyList<RawTrace> Record(PlannedPoint planned, IReadOnlyList<PlannedRange>? ranges = null)
    {
        var random = new Random(Seed);
        var traces = new List<RawTrace>();
        foreach (PlannedRange range in ranges ?? planned.Ranges)
        {
            double increment = range.Span / 4095;
            short[] codes = new short[planned.Samples];
            for (int i = 0; i < codes.Length; i++)
            {
                double value = Value(range.Channel, (i * planned.SampleInterval) - planned.Pretrigger)
                    + (Noise * range.Span * Normal(random));
                codes[i] = (short)Math.Clamp(Math.Round((value - range.Offset) / increment), -2048, 2047);
            }

            traces.Add(new RawTrace(
                range.Channel, codes, -planned.Pretrigger, planned.SampleInterval, increment, range.Offset, 0, -2048,
                    2047));
        }

        return traces;
    }

    private double Value(Channel channel, double t) => channel switch
    {
        Channel.VgsLow => Gate(t),
        Channel.VdsLow => Blocking(t),
        Channel.IdLow => CurrentGain * (CurrentBefore + Current(t)),
        Channel.VgsHigh => GateOff + ((HighGatePeak - GateOff) * Hump(t, On2 + Lag + Step, 60e-9)),
        Channel.VdsHigh => Rail(t) - Blocking(t) + (0.35 * Bus * Ring(t - On2 - Lag - (2.5 * Step))),
        Channel.IdHigh => Current(t) - Load(t),
        Channel.Vbus => Rail(t),
        _ => Load(t),
    };

    private double Gate(double t)
    {
        double share = Up(t, 0) - Up(t, Off1) + Up(t, On2) - Up(t, Off2);
        if (ExtraPulse)
        {
            share += Up(t, Off1 + (0.4 * Gap)) - Up(t, Off1 + (0.6 * Gap));
        }

        return GateOff + ((GateOn - GateOff) * share);
    }

    private static double Up(double t, double at) => Math.Clamp(0.5 + ((t - at) / GateEdge), 0, 1);

    private double Rail(double t) => Bus - (DroopVolts * Math.Clamp(t / Off1, 0, 1));

    /// <summary>The share of the bus across the low switch, its edges one lag after the gate's.</summary>
    private double Blocking(double t)
    {
        double off = 1 - Ramp(t, Lag, Step) + Ramp(t, Off1 + Lag, Step) - Ramp(t, On2 + Lag + Step, Step)
            + Ramp(t, Off2 + Lag, Step);
        double peak = 0.15 * Bus * Ring(t - Off1 - Lag - Step);
        return (off * Rail(t)) + ((1 - off) * OnVoltage) + peak;
    }

    private double Current(double t)
    {
        if (t < Off1 + Lag + Step)
        {
            return Load(t);
        }

        if (t < On2 + Lag)
        {
            return LoadAtOff1 * (1 - Ramp(t, Off1 + Lag + Step, Step / 2));
        }

        double rise = Ramp(t, On2 + Lag, Step) * Load(t);
        double recovery = RecoveryCurrent * Hump(t, On2 + Lag + (2 * Step), Step);
        double fall = 1 - Ramp(t, Off2 + Lag + Step, Step / 2);
        return (rise + recovery + (2 * Ring(t - On2 - Lag - (3 * Step)))) * fall;
    }

    private double Load(double t)
    {
        double charged = Math.Clamp(t - Lag - (Step / 2), 0, Off1);
        double first = Slope * charged * (1 + (Bend * Math.Pow(charged / Off1, 8)));
        double bulge = t > 0 && t < Off1 ? Bulge * Math.Sin(4 * Math.PI * t / Off1) : 0;
        return first + bulge + (Slope * Math.Clamp(t - On2 - Lag - Step, 0, Second));
    }

    private static double Ramp(double t, double start, double length) => Math.Clamp((t - start) / length, 0, 1);

    /// <summary>A triangle from 0 up to 1 and back.</summary>
    private static double Hump(double t, double centre, double half) => Math.Max(0, 1 - (Math.Abs(t - centre) / half));

    private double Ring(double t)
    {
        double omega = 2 * Math.PI * RingFrequency;
        return t < 0 ? 0 : Math.Exp(-RingDamping * omega * t) * Math.Sin(omega * t);
    }

    private static double Normal(Random random) =>
        Math.Sqrt(-2 * Math.Log(1 - random.NextDouble())) * Math.Cos(2 * Math.PI * random.NextDouble());
}
