using BenchRunner.Signals.Traces;
using static BenchRunner.Signals.Traces.Channel;

namespace BenchRunner.Signals.Quantities;

/// <summary>The catalogue's entries of the ringing after an edge: of the strongest mode of a fit of damped
/// cosines.</summary>
internal static class RingQuantities
{
    private static readonly Channel[] _diode = [VgsLow, VdsHigh];
    private static readonly Channel[] _current = [VgsLow, VdsHigh, IdLow];
    private static readonly Channel[] _switch = [VgsLow, VdsLow];

    /// <summary>The entries, in the catalogue's order.</summary>
    public static IReadOnlyList<Quantity> All { get; } =
    [
        Ring("ring_frequency", "Hz", "Damped frequency of the ringing of vds_high after on2. "
            + "Capacitance that depends on the voltage lowers it while the swing is large.", _diode),
        Ring("ring_damping", "1", "Damping ratio of that ringing. A second mode close by spoils it first.",
            _diode),
        Ring("ring_amplitude", "V", "Amplitude of that ringing where its window starts: an "
            + "instant that moves with the first extremum.", _diode),
        Ring("ring_q", "1", "Quality of that ringing: 1/(2 damping). As uncertain as the damping.", _diode),
        Ring("ring_frequency_id", "Hz", "Damped frequency of the ringing of id_low after on2. "
            + "A slow current probe sees little of it.", _current),
        Ring("ring_damping_id", "1", "Damping ratio of that ringing. Bandwidth and order of the fit move it.", _current),
        Ring("ring_frequency_off", "Hz", "Damped frequency of the ringing of vds_low after "
            + "off1. Often too short to fit.", _switch),
        Ring("ring_damping_off", "1", "Damping ratio of that ringing. Few periods make it uncertain.", _switch),
    ];

    private static Quantity Ring(string name, string unit, string meaning, IReadOnlyList<Channel> channels) =>
        new(name, unit, QuantityOwner.Circuit, meaning,
            [new("ring/fit", "Least-squares fit of one to three damped cosines from one period after the first "
                + "extremum to where the envelope is within the noise; the mode of largest A²/σ.", channels)]);
}
