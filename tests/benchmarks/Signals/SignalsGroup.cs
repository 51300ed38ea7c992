using System.Globalization;
using System.Text.Json.Nodes;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Ringing;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Benchmarks;

/// <summary>What the analysis of a capture costs, beside numpy and scipy; how good the ring fit is, beside its
/// bound.</summary>
internal sealed class SignalsGroup : IGroup
{
    private const int Small = 10_000;
    private const int Middle = 100_000;
    private const int Large = 1_000_000;
    private const double RingAgreement = 1e-6;

    private static readonly AnalysisSettings _settings = new() { ForwardVoltage = 3 };

    private readonly Peer _peer = Peer.Start();
    private readonly int _seed;
    private readonly RingMonteCarlo _rings;

    /// <summary>Sets the group up.</summary>
    /// <param name="seed">Seed of device, noise and draws.</param>
    public SignalsGroup(int seed)
    {
        _seed = seed;
        _rings = new RingMonteCarlo(seed);
        Benchmarks =
        [
            new Benchmark("signals/capture-10k", () => Capture(Small)),
            new Benchmark("signals/capture-1m", () => Capture(Large)),
            new Benchmark("signals/crossings", () => new CodeKernels(Record(Large)).MeasureCrossings()),
            new Benchmark("signals/integrals", () => new CodeKernels(Record(Large)).MeasureIntegrals()),
            new Benchmark("signals/ring-fit", RingFitBesidePeer),
            new Benchmark("signals/growth", Growth),
            new Benchmark("signals/ring-frequency-spread", _rings.FrequencySpread),
            new Benchmark("signals/ring-damping-spread", _rings.DampingSpread),
            new Benchmark("signals/ring-bias", _rings.Bias),
            new Benchmark("signals/ring-two-modes", () => RingTwoModes.Measure(seed)),
        ];
    }

    /// <inheritdoc/>
    public IReadOnlyList<Benchmark> Benchmarks { get; }

    /// <inheritdoc/>
    public void Dispose() => _peer.Dispose();

    private static AnalysisResult Analyse(IReadOnlyList<RawTrace> traces) =>
        WaveformAnalysis.Analyse(traces, _settings);

    private List<RawTrace> Record(int points) => Captures.Record(Captures.Circuit(_seed), _seed, points);

    private Outcome Capture(int points)
    {
        List<RawTrace> traces = Record(points);
        Rounds.Work ours = Rounds.Here(() => Analyse(traces));
        if (_peer.Missing is { } missing)
        {
            return new Outcome("s", Rounds.Time(ours)[0], Missing: missing);
        }

        LoadCapture(traces);
        string? wrong = CaptureAgreement.Check(Analyse(traces), _peer.Result("capture"), out string note);
        Figure[] times = Rounds.Time(ours, _peer.Run("capture"));
        return new Outcome("s", times[0], Peer: times[1], Missing: wrong, Note: note);
    }

    private void LoadCapture(List<RawTrace> traces)
    {
        JsonArray channels = [.. traces.Select(trace => new JsonObject
        {
            ["name"] = trace.Channel.Name(),
            ["increment"] = trace.Increment,
            ["origin"] = trace.Origin,
            ["reference"] = trace.Reference,
        })];
        JsonObject order = new()
        {
            ["channels"] = channels,
            ["interval"] = traces[0].SampleInterval,
            ["forward_voltage"] = _settings.ForwardVoltage,
            ["dead_time"] = _settings.DeadTime,
        };
        short[] codes = [.. traces.SelectMany(trace => trace.Codes)];
        _peer.Load("capture", "capture", order, Peer.Bytes<short>(codes));
    }

    private Outcome Growth()
    {
        List<RawTrace> middle = Record(Middle);
        List<RawTrace> large = Record(Large);
        Figure[] times = Rounds.Time(Rounds.Here(() => Analyse(middle)), Rounds.Here(() => Analyse(large)));
        Figure growth = new(times[1].Median / times[0].Median, times[0].Spread + times[1].Spread);
        return new Outcome("1", growth, Note: string.Create(
            CultureInfo.InvariantCulture, $"{times[0].Median:G3} s at 100 k, {times[1].Median:G3} s at 1 M"));
    }

    private Outcome RingFitBesidePeer()
    {
        NoisyRing ring = NoisyRing.Usual with { Noise = 0.01 };
        double[] samples = ring.Samples(new Normal(_seed));
        Rounds.Work ours = Rounds.Here(() => RingFit.Fit(samples, ring.Interval, RingFit.MostModes));
        if (_peer.Missing is { } missing)
        {
            return new Outcome("s", Rounds.Time(ours)[0], Missing: missing);
        }

        _peer.Load("ring", "ring", new JsonObject { ["interval"] = ring.Interval }, Peer.Bytes<double>(samples));
        Dictionary<string, double> theirs = _peer.Result("ring");
        RingMode mode = RingFit.Fit(samples, ring.Interval, RingFit.MostModes).Modes[0];
        double frequency = Math.Abs((mode.Frequency / theirs["frequency"]) - 1);
        double damping = Math.Abs((mode.Damping / theirs["damping"]) - 1);
        string? wrong = Math.Max(frequency, damping) <= RingAgreement ? null : "the fits differ by more than 1e-6";
        Figure[] times = Rounds.Time(ours, _peer.Run("ring"));
        return new Outcome("s", times[0], Peer: times[1], Missing: wrong, Note: string.Create(
            CultureInfo.InvariantCulture,
            $"f {mode.Frequency:G9} Hz, damping {mode.Damping:G6}; differ by {frequency:G2} and {damping:G2}"));
    }
}
