using FakeBench.Physics;
using FakeBench.Probes;

namespace FakeBench.Fixtures;

/// <summary>The probes of the bench: by channel name, with errors that its bench file's uncertainties cover.</summary>
public static class BenchProbes
{
    /// <summary>Root mean square of the trigger's jitter, s.</summary>
    public const double TriggerJitter = 20e-12;

    private const double Bandwidth = 500e6;

    private static readonly (string Name, ProbeChannel Probe)[] All =
    [
        ("vgs_low", Gate(Signal.VgsLow, 1.002, 0.02, 40e-12)),
        ("vds_low", Voltage(Signal.VdsLow, 1.0015, 0.12, 60e-12)),
        ("id_low", Shunt(Signal.IdLow, 0.998, 0.06, 110e-12)),
        ("vgs_high", Gate(Signal.VgsHigh, 0.999, -0.03, 50e-12)),
        ("vds_high", Voltage(Signal.VdsHigh, 0.9985, -0.1, 90e-12)),
        ("id_high", Current(Signal.IdHigh, 1.002, -0.05, 80e-12)),
        ("vbus", Voltage(Signal.Vbus, 1.001, 0.2, 0)),
        ("i_load", Current(Signal.ILoad, 0.999, 0.04, 70e-12)),
    ];

    /// <summary>Names of the channels that can be recorded.</summary>
    public static IReadOnlyList<string> Names { get; } = [.. All.Select(p => p.Name)];

    /// <summary>The probe of a channel.</summary>
    /// <param name="channel">Its name.</param>
    /// <param name="loadToNegative">Whether the high place fires: then each place has the other one's probes, but a
    /// transformer instead of the shunt, whose conductor would swing with the switch node.</param>
    /// <exception cref="FormatException">No channel has that name.</exception>
    public static ProbeChannel Of(string channel, bool loadToNegative = false)
    {
        if (loadToNegative)
        {
            ProbeChannel twin = Of(Mirror.Of(channel));
            return twin with { Signal = Mirror.Of(twin.Signal), Lead = 0 };
        }

        foreach ((string name, ProbeChannel probe) in All)
        {
            if (name == channel)
            {
                return probe;
            }
        }

        throw new FormatException($"no channel is called '{channel}'; there are {string.Join(", ", Names)}");
    }

    private static ProbeChannel Gate(Signal signal, double gain, double offset, double skew) =>
        new(signal)
        {
            Gain = gain,
            Offset = offset,
            Skew = skew,
            Bandwidth = Bandwidth,
            Noise = 0.015,
            Attenuation = 10,
        };

    private static ProbeChannel Voltage(Signal signal, double gain, double offset, double skew) =>
        new(signal)
        {
            Gain = gain,
            Offset = offset,
            Skew = skew,
            Bandwidth = Bandwidth,
            Noise = 0.3,
            Attenuation = 100,
        };

    private static ProbeChannel Shunt(Signal signal, double gain, double offset, double skew)
    {
        BenchParts parts = new();
        return Current(signal, gain, offset, skew) with { Lead = parts.ShuntSenseInductance / parts.ShuntResistance };
    }

    private static ProbeChannel Current(Signal signal, double gain, double offset, double skew) =>
        new(signal) { Gain = gain, Offset = offset, Skew = skew, Bandwidth = Bandwidth, Noise = 0.04 };
}
