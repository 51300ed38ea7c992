using FakeBench.Physics;
using FakeBench.Probes;

namespace FakeBench.Tests.Ugly;

/// <summary>The set of ugly records. What is ugly is what real records show; sizes and values are made up.</summary>
internal static class UglyCases
{
    private const double Fast = 500e6;

    private static readonly PulseTrain _train = new(6e-6, 5e-6, 2.5e-6, 18, -4, 400);

    /// <summary>All of them.</summary>
    public static IReadOnlyList<UglyCase> All { get; } =
    [
        new("ringing-gate", "The gate rings on every edge through 50 % and up to twice its level.",
            _train, -1e-6, 2e-9, 8000)
        {
            GateResonance = (30e6, 0.012),
            Channels =
            [
                ("vgs_low", Gate(), new Digitiser(8, 100, 8)), ("vds_low", Voltage(Signal.VdsLow), Volts),
                ("id_low", Current(), Amperes), ("vbus", Voltage(Signal.Vbus), Volts),
            ],
            Tolerance = 0.03,
            Tolerances = new Dictionary<string, double> { ["irm"] = 0.06, ["trr"] = 0.12, ["qrr"] = 0.08 },
        },
        new("coarse-steps", "Eight bits over far too wide a range: a step of the voltage is 1 % of the bus.",
            _train, -1e-6, 2e-9, 8000)
        {
            Channels =
            [
                ("vgs_low", Gate(), new Digitiser(8, 60, 8)), ("vds_low", Voltage(Signal.VdsLow), Coarse),
                ("id_low", Current(), new Digitiser(8, 0.01 * 256 * 60, 20)),
                ("vds_high", Voltage(Signal.VdsHigh), Coarse),
            ],
            Tolerance = 0.06,
            Tolerances = new Dictionary<string, double>
            {
                ["irm"] = 0.12, ["trr"] = 0.3, ["qrr"] = 0.25, ["bus_voltage"] = 0.02,
            },
        },
        new("below-zero", "The voltage probe sees 12 nH of the loop: vds falls far below zero after the turn-on.",
            _train, -1e-6, 2e-9, 8000)
        {
            Spoil = train => AddSlope(train[Signal.VdsLow], train[Signal.IdLow], 12e-9 / train.Interval),
            Channels =
            [
                ("vgs_low", Gate(), new Digitiser(8, 60, 8)), ("vds_low", Voltage(Signal.VdsLow), Volts),
                ("id_low", Current(), Amperes), ("vbus", Voltage(Signal.Vbus), Volts),
            ],
            Tolerance = 0.05,
            Tolerances = new Dictionary<string, double> { ["irm"] = 0.06, ["trr"] = 0.12, ["qrr"] = 0.08 },
        },
        new("slow-current", "The current's probe has 60 MHz where the voltage's has 500 MHz; its delay is stated.",
            _train, -1e-6, 2e-9, 8000)
        {
            Channels =
            [
                ("vgs_low", Gate(), new Digitiser(8, 60, 8)), ("vds_low", Voltage(Signal.VdsLow), Volts),
                ("id_low", Current() with { Bandwidth = 60e6, Offset = 0.4 }, Amperes),
                ("vds_high", Voltage(Signal.VdsHigh), Volts),
            ],
            // A pole of B delays a ramp by 1/(2 pi B).
            Stated = new Dictionary<string, (double, double?, double)>
            {
                ["id_low"] = (1, null, (1 / (2 * Math.PI * 60e6)) - (1 / (2 * Math.PI * Fast))),
            },
            Tolerance = 0.05,
            // What the pole takes off the peak and the slope is lost.
            Tolerances = new Dictionary<string, double>
            {
                ["irm"] = 0.1, ["trr"] = 0.15, ["qrr"] = 0.1, ["didt_on"] = 0.2,
            },
        },
        new("ringing-load", "The load rings at 3 MHz after each turn-on, over the whole second ramp.",
            _train, -1e-6, 2e-9, 8000)
        {
            Spoil = train =>
            {
                AddRing(train, 0, 1.2, 3e6, 0.9e-6);
                AddRing(train, _train.On2, 1.2, 3e6, 0.9e-6);
            },
            Channels =
            [
                ("vgs_low", Gate(), new Digitiser(8, 60, 8)), ("vds_low", Voltage(Signal.VdsLow), Volts),
                ("id_low", Current(), Amperes), ("vbus", Voltage(Signal.Vbus), Volts),
            ],
            Tolerance = 0.05,
            Tolerances = new Dictionary<string, double> { ["irm"] = 0.1, ["trr"] = 0.15, ["qrr"] = 0.15 },
        },
        new("gate-current", "The current holds the gate's, and the record begins inside the first pulse.",
            _train, 2e-6, 1.5e-9, 8500)
        {
            Spoil = train => AddSlope(train[Signal.IdLow], train[Signal.VgsLow], 1.5e-9 / train.Interval),
            Channels =
            [
                ("vgs_low", Gate(), new Digitiser(8, 60, 8)), ("vds_low", Voltage(Signal.VdsLow), Volts),
                ("id_low", Current() with { Offset = -0.7, Gain = 1.02 }, Amperes),
                ("vds_high", Voltage(Signal.VdsHigh), Volts),
            ],
            Stated = new Dictionary<string, (double, double?, double)> { ["id_low"] = (1.02, null, 0) },
            Tolerance = 0.05,
            Tolerances = new Dictionary<string, double> { ["irm"] = 0.06, ["trr"] = 0.12, ["qrr"] = 0.08 },
        },
        new("clipped-peak", "The range ends below the peak of vds_high and of the current; clipped samples are marked.",
            _train, -1e-6, 2e-9, 8000)
        {
            MarksClipped = true,
            Channels =
            [
                ("vgs_low", Gate(), new Digitiser(8, 60, 8)), ("vds_low", Voltage(Signal.VdsLow), Volts),
                ("id_low", Current(), new Digitiser(8, 60, 20)),
                ("vds_high", Voltage(Signal.VdsHigh), new Digitiser(8, 600, 260)),
            ],
            Tolerance = 0.05,
        },
        new("everything", "All of it at once, in a record that ends inside the second pulse.",
            _train, -0.8e-6, 2e-9, 6700)
        {
            GateResonance = (33e6, 0.06),
            Spoil = train =>
            {
                AddRing(train, 0, 0.8, 4e6, 0.6e-6);
                AddRing(train, _train.On2, 0.8, 4e6, 0.6e-6);
                AddSlope(train[Signal.IdLow], train[Signal.VgsLow], 1e-9 / train.Interval);
                AddSlope(train[Signal.VdsLow], train[Signal.IdLow], 8e-9 / train.Interval);
            },
            Channels =
            [
                ("vgs_low", Gate(), new Digitiser(8, 110, 8)),
                ("vds_low", Voltage(Signal.VdsLow) with { Gain = 0.99, Offset = 3 }, Coarse),
                ("id_low", Current() with { Bandwidth = 80e6, Offset = 0.5 }, Amperes),
                ("vbus", Voltage(Signal.Vbus), Volts),
            ],
            Stated = new Dictionary<string, (double, double?, double)>
            {
                ["vds_low"] = (0.99, 3, 0),
                ["id_low"] = (1, null, (1 / (2 * Math.PI * 80e6)) - (1 / (2 * Math.PI * Fast))),
            },
            Tolerance = 0.08,
            Tolerances = new Dictionary<string, double>
            {
                ["irm"] = 0.15, ["trr"] = 0.3, ["qrr"] = 0.25, ["didt_on"] = 0.2,
            },
        },
    ];

    private static Digitiser Volts => new(8, 800, 290);

    private static Digitiser Coarse => new(8, 0.01 * 256 * 400, 300);

    private static Digitiser Amperes => new(8, 90, 25);

    private static ProbeChannel Gate() => new(Signal.VgsLow) { Bandwidth = Fast, Noise = 0.05 };

    private static ProbeChannel Voltage(Signal signal) => new(signal) { Bandwidth = Fast, Noise = 0.6 };

    private static ProbeChannel Current() => new(Signal.IdLow) { Bandwidth = Fast, Noise = 0.08 };

    /// <summary>Adds a multiple of another signal's slope, by central differences.</summary>
    private static void AddSlope(double[] to, double[] of, double samples)
    {
        for (int i = 1; i < to.Length - 1; i++)
        {
            to[i] += samples * 0.5 * (of[i + 1] - of[i - 1]);
        }
    }

    /// <summary>Adds a damped sine to the load's current, which the conducting switch carries.</summary>
    private static void AddRing(TrainTrajectory train, double from, double amplitude, double frequency, double decay)
    {
        double[] bus = train[Signal.Vbus], vds = train[Signal.VdsLow];
        bool conducts = false;
        double since = 0;
        for (int i = 0; i < train.Points; i++)
        {
            double time = train.Start + (i * train.Interval);
            if (time < from)
            {
                continue;
            }

            if (!conducts && vds[i] < bus[i] / 2)
            {
                (conducts, since) = (true, time);
            }

            if (conducts)
            {
                if (vds[i] > bus[i] / 2)
                {
                    return;
                }

                double ring = amplitude * Math.Exp(-(time - since) / decay)
                    * Math.Sin(2 * Math.PI * frequency * (time - since));
                train[Signal.IdLow][i] += ring;
                train[Signal.ILoad][i] += ring;
            }
        }
    }
}
