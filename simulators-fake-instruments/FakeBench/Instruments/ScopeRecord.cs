using FakeBench.Physics;
using FakeBench.Probes;

namespace FakeBench.Instruments;

/// <summary>What the scope holds of one train: codes of every input, made when they are wanted.</summary>
public sealed class ScopeRecord
{
    private readonly Lazy<short[]>[] _codes;
    private readonly IReadOnlyList<RecordedInput> _inputs;

    /// <summary>Makes a record.</summary>
    /// <param name="settings">The settings in force when the scope was armed.</param>
    /// <param name="train">The train, cut to the record's samples.</param>
    /// <param name="inputs">How each input records.</param>
    /// <param name="key">What noise and jitter depend on.</param>
    /// <param name="shift">How much later than the grid of the train says everything happens, s.</param>
    /// <param name="bits">Bits of the converter.</param>
    public ScopeRecord(
        AcquisitionSettings settings,
        TrainTrajectory train,
        IReadOnlyList<RecordedInput> inputs,
        CaptureKey key,
        double shift,
        int bits)
    {
        ArgumentNullException.ThrowIfNull(settings);
        ArgumentNullException.ThrowIfNull(inputs);
        Settings = settings;
        _inputs = inputs;
        _codes = new Lazy<short[]>[inputs.Count];
        for (int i = 0; i < inputs.Count; i++)
        {
            int input = i;
            var converter = new Digitiser(bits, inputs[i].Span, inputs[i].Offset);
            _codes[i] = new Lazy<short[]>(
                () => Recorder.Record(
                    train, inputs[input].Probe, converter, key.Noise(input + 1), shift)[..inputs[input].Points]);
        }
    }

    /// <summary>The settings in force when the scope was armed.</summary>
    public AcquisitionSettings Settings { get; }

    /// <summary>Samples of an input.</summary>
    /// <param name="input">Input, from 1.</param>
    public int Points(int input) => _inputs[input - 1].Points;

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
