using FakeBench.Population;

namespace FakeBench.Probes;

/// <summary>All that the chance in one capture depends on: equal keys, equal noise and jitter.</summary>
/// <param name="Seed">Seed of the bench.</param>
/// <param name="Serial">Device in the socket.</param>
/// <param name="Fire">Count of fires since the bench started; negative: of records taken without a train.</param>
public readonly record struct CaptureKey(int Seed, string Serial, long Fire)
{
    private const long JitterStream = -1;

    /// <summary>Shift of the whole record against the driver, s, normal with the given deviation.</summary>
    /// <param name="deviation">Root mean square of the trigger's jitter, s.</param>
    public double Jitter(double deviation) =>
        deviation == 0 ? 0 : deviation * new SplitMix(Stream(JitterStream)).NextNormal();

    /// <summary>Key of the noise of one scope channel.</summary>
    /// <param name="channel">Number of the channel, from 1.</param>
    public ulong Noise(int channel) => Stream(channel);

    private ulong Stream(long purpose) => SplitMix.Key(Serial, Seed, Fire, purpose);
}
