using System.Globalization;
using System.Text.Json;
using System.Text.Json.Nodes;
using System.Text.Json.Serialization;
using FakeBench.Physics;

namespace BenchRunner.Benchmarks;

/// <summary>What one simulated capture costs, beside LSODA on the same equations.</summary>
/// <remarks>Ours holds the observation of eight signals, the probes, noise and rounding of four channels; the peer's
/// does not: it solves, and forms four signals without noise.</remarks>
internal sealed class FakeGroup : IGroup
{
    private const int Points = 10_000;
    private const double PeerTolerance = 1e-4;
    private const double ReferenceTolerance = 1e-6;
    private const double PeakAgreement = 0.005;

    private static readonly JsonSerializerOptions _form =
        new() { NumberHandling = JsonNumberHandling.AllowNamedFloatingPointLiterals };

    private static readonly (string Name, Signal Signal)[] _peaks =
        [("vds_low", Signal.VdsLow), ("id_low", Signal.IdLow), ("vds_high", Signal.VdsHigh)];

    private readonly Peer _peer = Peer.Start();
    private readonly CircuitParameters _circuit;
    private readonly Action _ours;

    /// <summary>Sets the group up.</summary>
    /// <param name="seed">Seed of device and noise.</param>
    public FakeGroup(int seed)
    {
        _circuit = Captures.Circuit(seed);
        _ours = () => Captures.Record(_circuit, seed, Points);
        Benchmarks =
        [
            new Benchmark("fake/capture-10k", BesidePeer),
            new Benchmark("fake/capture-10k-core", () => new Outcome("s", Rounds.Time(Rounds.Here(_ours))[0])),
        ];
    }

    /// <inheritdoc/>
    public IReadOnlyList<Benchmark> Benchmarks { get; }

    /// <inheritdoc/>
    public void Dispose() => _peer.Dispose();

    private Outcome BesidePeer()
    {
        if (_peer.Missing is { } missing)
        {
            return new Outcome("s", Rounds.Time(Rounds.Here(_ours))[0], Missing: missing);
        }

        Load("train", PeerTolerance);
        Load("reference", ReferenceTolerance);
        Dictionary<string, double> reference = _peer.Result("reference");
        Dictionary<string, double> theirs = _peer.Result("train");
        Dictionary<string, double> ours = Peaks();
        string? wrong = Away(ours, reference).Exists(peak => Math.Abs(peak.Part) > PeakAgreement)
            ? "a peak is more than 0.5 % away from LSODA at 1e-6"
            : null;
        string note = $"peaks against LSODA at 1e-6: ours {Text(Away(ours, reference))}; LSODA at 1e-4 "
            + Text(Away(theirs, reference));
        Figure[] times = Rounds.Time(Rounds.Here(_ours), _peer.Run("train"));
        return new Outcome("s", times[0], Peer: times[1], Missing: wrong, Note: note);
    }

    private void Load(string work, double tolerance) => _peer.Load(
        work,
        "bridge",
        new JsonObject
        {
            ["circuit"] = JsonSerializer.SerializeToNode(_circuit, _form),
            ["train"] = JsonSerializer.SerializeToNode(Captures.Rated, _form),
            ["start"] = Captures.Start,
            ["interval"] = Captures.Interval(Points),
            ["points"] = Points,
            ["tolerance"] = tolerance,
        },
        []);

    private Dictionary<string, double> Peaks()
    {
        TrainTrajectory train = HalfBridge.Simulate(
            _circuit, Captures.Rated, Captures.Start, Captures.Interval(Points), Points);
        return _peaks.ToDictionary(peak => peak.Name, peak => train[peak.Signal].Max());
    }

    private static List<(string Name, double Part)> Away(
        Dictionary<string, double> peaks, Dictionary<string, double> reference) =>
        [.. _peaks.Select(peak => (peak.Name, (peaks[peak.Name] / reference[peak.Name]) - 1))];

    private static string Text(List<(string Name, double Part)> peaks) => string.Join(", ", peaks.Select(peak =>
        string.Create(CultureInfo.InvariantCulture, $"{peak.Name} {peak.Part:+0.000 %;-0.000 %}")));
}
