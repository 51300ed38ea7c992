using FakeBench.Faults;
using FakeBench.Fixtures;
using FakeBench.Physics;
using FakeBench.Population;
using FakeBench.Probes;

namespace FakeBench.Instruments;

/// <summary>What lies before the inputs of the scope, with what device and faults do to it.</summary>
public sealed class ScopeInputs
{
    private readonly Bench _bench;
    private readonly string[] _channels;
    private readonly HashSet<int> _degaussed = [];

    /// <summary>Puts a probe on each input.</summary>
    /// <param name="bench">The bench.</param>
    /// <param name="channels">Names of the channels on inputs 1, 2, …</param>
    public ScopeInputs(Bench bench, IReadOnlyList<string> channels)
    {
        ArgumentNullException.ThrowIfNull(bench);
        _bench = bench;
        _channels = [.. channels];
        Probes = [.. channels.Select(channel => BenchProbes.Of(Connected(channel), bench.LoadToNegative))];
        Current = Input("id_low");
    }

    /// <summary>The sound probes.</summary>
    public IReadOnlyList<ProbeChannel> Probes { get; }

    /// <summary>Input of the firing place's current, from 1; null: not recorded.</summary>
    public int? Current { get; }

    /// <summary>Takes the remanence out of a current probe; nothing to take out of any other.</summary>
    /// <param name="input">Input, from 1.</param>
    public void Degauss(int input)
    {
        if (_bench.Faults.Has(FaultCatalogue.ProbeDrift))
        {
            _degaussed.Add(input);
        }
    }

    /// <summary>How each input records now.</summary>
    /// <param name="settings">The settings in force.</param>
    /// <param name="inTrain">Whether a train is recorded: faults that happen once happen in it.</param>
    public IReadOnlyList<RecordedInput> Now(AcquisitionSettings settings, bool inTrain)
    {
        ArgumentNullException.ThrowIfNull(settings);
        FaultPlan faults = _bench.Faults;
        int? freewheeling = Input("vds_high");
        bool overdriven = inTrain && faults.Take(FaultCatalogue.ClippedRange);
        bool weak = inTrain && faults.Take(FaultCatalogue.WeakSignal);
        bool cut = inTrain && faults.Take(FaultCatalogue.ShortRecord);
        bool arcs = faults.Has(FaultCatalogue.Arcing);
        int? blocking = Input("vds_low");
        bool noisy = faults.Has(FaultCatalogue.NoisyProbe) && _bench.BankVoltage >= FaultCatalogue.NoiseFrom;
        var inputs = new List<RecordedInput>();
        for (int i = 1; i <= Probes.Count; i++)
        {
            InputSettings set = settings.Inputs[i - 1];
            ProbeChannel probe = Changes.On(Probes[i - 1], Name(i), _bench.Changes, _bench.BankVoltage);
            bool drifted = i == Current && faults.Has(FaultCatalogue.ProbeDrift) && !_degaussed.Contains(i);
            probe = probe with
            {
                Offset = probe.Offset + (drifted ? FaultCatalogue.OffsetStep : 0),
                Gain = probe.Gain * (weak && i == freewheeling ? FaultCatalogue.WeakSwing : 1),
                Noise = noisy && i == freewheeling ? FaultCatalogue.ProbeNoise : probe.Noise,
            };
            bool isOff = i == blocking && faults.Has(FaultCatalogue.ProbeOff);
            probe = probe with
            {
                Gain = isOff ? 0 : probe.Gain,
                Noise = arcs ? FaultCatalogue.ArcNoise : isOff ? FaultCatalogue.OpenNoise : probe.Noise,
            };
            double span = overdriven ? set.Span / 2 : set.Span;
            inputs.Add(new RecordedInput(probe.ShownBy(set.Attenuation), span, set.Offset)
            {
                Points = cut && i == Probes.Count ? settings.Points / 2 : settings.Points,
            });
        }

        return inputs;
    }

    private string Connected(string channel) => !_bench.Faults.Has(FaultCatalogue.ProbesSwapped) ? channel
        : channel switch
        {
            "vds_low" => "vds_high",
            "vds_high" => "vds_low",
            _ => channel,
        };

    // The name that a channel has on a bench whose low place fires.
    private string Name(int input) =>
        _bench.LoadToNegative ? Mirror.Of(_channels[input - 1]) : _channels[input - 1];

    private int? Input(string name)
    {
        int at = Array.IndexOf(_channels, _bench.LoadToNegative ? Mirror.Of(name) : name);
        return at < 0 ? null : at + 1;
    }
}
