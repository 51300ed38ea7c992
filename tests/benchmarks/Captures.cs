using BenchRunner.Signals.Traces;
using FakeBench.Physics;
using FakeBench.Population;
using FakeBench.Probes;

namespace BenchRunner.Benchmarks;

/// <summary>The simulated captures that the benchmarks work on.</summary>
internal static class Captures
{
    /// <summary>Time of the first sample, s.</summary>
    public const double Start = -1e-6;

    /// <summary>Serial of the device in the socket.</summary>
    public const string Serial = "W1200-0001";

    private const double Duration = 20e-6;
    private const double Bandwidth = 500e6;

    private static readonly (Channel Channel, Signal Signal, double Span, double Centre)[] _inputs =
    [
        (Channel.VgsLow, Signal.VgsLow, 44, 7),
        (Channel.VdsLow, Signal.VdsLow, 1400, 570),
        (Channel.IdLow, Signal.IdLow, 170, 45),
        (Channel.VdsHigh, Signal.VdsHigh, 1400, 570),
    ];

    /// <summary>The train: 600 V, 40 A.</summary>
    public static PulseTrain Rated { get; } = new(8.08e-6, 6e-6, 3e-6, 18, -4, 600);

    /// <summary>The circuit with a device of the population.</summary>
    public static CircuitParameters Circuit(int seed) =>
        DevicePopulation.Draw(Serial, seed).On(new BenchParts());

    /// <summary>Sample interval of a capture of so many points, s.</summary>
    public static double Interval(int points) => Duration / points;

    /// <summary>A whole capture: the circuit solved, four channels recorded as a 12-bit scope gives them, with noise of
    /// an LSB and 500 MHz.</summary>
    public static List<RawTrace> Record(CircuitParameters circuit, int seed, int points)
    {
        double interval = Interval(points);
        TrainTrajectory train = HalfBridge.Simulate(circuit, Rated, Start, interval, points);
        CaptureKey key = new(seed, Serial, 1);
        List<RawTrace> traces = [];
        foreach ((Channel channel, Signal signal, double span, double centre) in _inputs)
        {
            Digitiser digitiser = new(12, span, centre);
            short[] codes = Recorder.Record(
                train,
                new ProbeChannel(signal) { Bandwidth = Bandwidth, Noise = digitiser.Step },
                digitiser,
                key.Noise((int)signal),
                key.Jitter(20e-12));
            traces.Add(new RawTrace(
                channel, codes, Start, interval, digitiser.Step, centre, 0, digitiser.Lowest, digitiser.Highest));
        }

        return traces;
    }
}
