using FakeBench.Physics;
using FakeBench.Population;
using FakeBench.Probes;

namespace BenchRunner.Benchmarks;

/// <summary>What one simulated capture costs: the circuit solved, four channels recorded.</summary>
internal static class FakeBenchmarks
{
    private const int Points = 10_000;
    private const double Interval = 2e-9;
    private static readonly PulseTrain Rated = new(8.08e-6, 6e-6, 3e-6, 18, -4, 600);

    public static IEnumerable<Row> Rows(int seed)
    {
        Device device = DevicePopulation.Draw("W1200-0001", seed);
        CircuitParameters circuit = device.On(new BenchParts());
        (double seconds, double spread) = Rounds.Time(() => Capture(circuit, seed))[0];
        yield return new Row(
            "fake", "fake/capture-10k", "s", seconds, spread, null, null, 0.02, "peer", "lower",
            "the peer (python3-scipy: LSODA on the same equations) is not written yet");
        yield return new Row("fake", "fake/capture-10k-core", "s", seconds, spread, null, null, 0.020, "ours", "lower");
    }

    private static void Capture(CircuitParameters circuit, int seed)
    {
        TrainTrajectory train = HalfBridge.Simulate(circuit, Rated, -1e-6, Interval, Points);
        var key = new CaptureKey(seed, "W1200-0001", 1);
        (Signal Signal, double Span, double Centre)[] channels =
            [(Signal.VgsLow, 44, 7), (Signal.VdsLow, 1400, 570), (Signal.IdLow, 170, 45), (Signal.VdsHigh, 1400, 570)];
        for (int i = 0; i < channels.Length; i++)
        {
            (Signal signal, double span, double centre) = channels[i];
            Recorder.Record(
                train,
                new ProbeChannel(signal) { Bandwidth = 500e6, Noise = span / 4000 },
                new Digitiser(12, span, centre),
                key.Noise(i),
                key.Jitter(20e-12));
        }
    }
}
