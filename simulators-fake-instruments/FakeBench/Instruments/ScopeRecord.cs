using FakeBench.Physics;
using FakeBench.Probes;

namespace FakeBench.Instruments;

/// <summary>What the scope holds of one train: codes of every input, made when they are wanted.</summary>
public sealed class ScopeRecord
{
    private readonly Lazy<short[]>[] _codes;

    /// <summary>Makes a record.</summary>
    /// <param name="settings">The settings in force when the scope was armed.</param>
    /// <param name="train">The train, cut to the record's samples.</param>
    /// <param name="probes">What lies before each input.</param>
    /// <param name="key">What noise and jitter depend on.</param>
    /// <param name="shift">How much later than the grid of the train says everything happens, s.</param>
    /// <param name="bits">Bits of the converter.</param>
    /// <param name="overdriven">Whether the amplifiers are at twice their gain.</param>
    public ScopeRecord(
        AcquisitionSettings settings,
        TrainTrajectory train,
        IReadOnlyList<ProbeChannel> probes,
        CaptureKey key,
        double shift,
        int bits,
        bool overdriven)
    {
        ArgumentNullException.ThrowIfNull(settings);
        ArgumentNullException.ThrowIfNull(probes);
        Settings = settings;
        _codes = new Lazy<short[]>[probes.Count];
        for (int i = 0; i < probes.Count; i++)
        {
            int input = i;
            InputSettings set = settings.Inputs[i];
            var converter = new Digitiser(bits, overdriven ? set.Span / 2 : set.Span, set.Offset);
            _codes[i] = new Lazy<short[]>(
                () => Recorder.Record(
                    train, probes[input].ShownBy(set.Attenuation), converter, key.Noise(input + 1), shift));
        }
    }

    /// <summary>The settings in force when the scope was armed.</summary>
    public AcquisitionSettings Settings { get; }

    /// <summary>Codes of an input.</summary>
    /// <param name="input">Input, from 1.</param>
    public short[] Codes(int input) => _codes[input - 1].Value;

    /// <summary>Makes the codes beside what goes on, so that they are there when they are asked for.</summary>
    public void Prepare() => _ = Task.Run(() =>
    {
        foreach (Lazy<short[]> codes in _codes)
        {
            _ = codes.Value;
        }
    });
}
