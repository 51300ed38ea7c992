using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;
using FakeBench.Physics;
using FakeBench.Population;
using FakeBench.Probes;

namespace BenchRunner.Benchmarks;

/// <summary>What the analysis of a capture costs, and how it grows with the record.</summary>
internal static class SignalsBenchmarks
{
    private const double Duration = 20e-6;

    public static IEnumerable<Row> Rows(int seed)
    {
        var settings = new AnalysisSettings { ForwardVoltage = 3 };
        Waveform small = Record(seed, 10_000);
        Waveform middle = Record(seed, 100_000);
        Waveform large = Record(seed, 1_000_000);
        (double Median, double Spread)[] times = Rounds.Time(
            () => WaveformAnalysis.Analyse(small, settings),
            () => WaveformAnalysis.Analyse(middle, settings),
            () => WaveformAnalysis.Analyse(large, settings));
        yield return new Row(
            "signals", "signals/capture-10k", "s", times[0].Median, times[0].Spread, null, null, 0.167, "peer", "lower",
            "the peer (python3-scipy: the same definitions) is not written yet");
        yield return new Row(
            "signals", "signals/growth", "1", times[2].Median / times[1].Median, times[1].Spread + times[2].Spread,
            null, null, 11,
            "ours", "lower");
    }

    private static Waveform Record(int seed, int points)
    {
        double interval = Duration / points;
        CircuitParameters circuit = DevicePopulation.Draw("W1200-0001", seed).On(new BenchParts());
        var pulses = new PulseTrain(8.08e-6, 6e-6, 3e-6, 18, -4, 600);
        TrainTrajectory train = HalfBridge.Simulate(circuit, pulses, -1e-6, interval, points);
        return new Waveform(-1e-6, interval, new Dictionary<Channel, double[]>
        {
            [Channel.VgsLow] = Recorded(train, Signal.VgsLow, 44, 7, seed),
            [Channel.VdsLow] = Recorded(train, Signal.VdsLow, 1400, 570, seed),
            [Channel.IdLow] = Recorded(train, Signal.IdLow, 170, 45, seed),
            [Channel.VdsHigh] = Recorded(train, Signal.VdsHigh, 1400, 570, seed),
        });
    }

    /// <summary>As a 12-bit scope gives it: noise of a LSB, 500 MHz.</summary>
    private static double[] Recorded(TrainTrajectory train, Signal signal, double span, double centre, int seed)
    {
        var digitiser = new Digitiser(12, span, centre);
        short[] codes = Recorder.Record(
            train,
            new ProbeChannel(signal) { Bandwidth = 500e6, Noise = digitiser.Step },
            digitiser,
            new CaptureKey(seed, "W1200-0001", 1).Noise((int)signal),
            jitter: 0);
        return [.. codes.Select(digitiser.Value)];
    }
}
