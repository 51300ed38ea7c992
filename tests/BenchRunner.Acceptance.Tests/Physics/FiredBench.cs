using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Traces;
using FakeBench.Fixtures;
using FakeBench.Physics;
using FakeBench.Population;
using FakeBench.Probes;
using Bench = BenchRunner.Acceptance.Benches.Bench;
using Circuit = FakeBench.Physics.HalfBridge;
using HalfBridge = BenchRunner.Acceptance.Plans.HalfBridge;
using PulseTrain = FakeBench.Physics.PulseTrain;

namespace BenchRunner.Acceptance.Tests.Physics;

/// <summary>
/// A bench in process: FakeBench's half bridge, probes and converter, without wires. It fires a train that a plan asks
/// for and gives the traces that a scope would. What a test changes is the one flaw of the bench.
/// </summary>
internal sealed record FiredBench(Sequence Sequence, Bench Bench)
{
    public const string HealthySerial = "W1200-0001";

    public string Serial { get; init; } = HealthySerial;

    public int Seed { get; init; } = 1;

    public int Bits { get; init; } = 12;

    /// <summary>What is wrong with load, bank, shunt or driver.</summary>
    public Func<BenchParts, BenchParts> Fixture { get; init; } = parts => parts;

    /// <summary>What is wrong with the device.</summary>
    public Func<Device, Device> Part { get; init; } = device => device;

    /// <summary>What is wrong with the pulser.</summary>
    public Func<PulseTrain, PulseTrain> Pulser { get; init; } = train => train;

    /// <summary>Share of the bus voltage asked for at which the bank is, by the count of fires.</summary>
    public Func<long, double> BusShare { get; init; } = _ => 1;

    /// <summary>What is wrong with a probe.</summary>
    public Func<Channel, ProbeChannel, ProbeChannel> Probe { get; init; } = (_, probe) => probe;

    /// <summary>The bank's voltage before a train, V, as a voltmeter reads it.</summary>
    public double Bank(PlannedPoint planned, long fire) => BusShare(fire) * planned.Point.BusVoltage;

    /// <summary>Fires a train as set, at the point's bus voltage, and records it on the ranges asked for.</summary>
    /// <param name="planned">The point.</param>
    /// <param name="set">The train.</param>
    /// <param name="ranges">The ranges.</param>
    /// <param name="fire">Count of fires since the bench started: noise and jitter depend on it.</param>
    public IReadOnlyList<RawTrace> Fire(
        PlannedPoint planned, TrainSet set, IReadOnlyList<PlannedRange> ranges, long fire)
    {
        Device device = Part(DevicePopulation.Draw(Serial, Seed));
        var train = new PulseTrain(
            set.First, set.Gap, set.Second, set.GateOn, set.GateOff, Bank(planned, fire));
        CircuitParameters circuit = device.On(Fixture(new BenchValues(1).Parts)) with
        {
            LoadToNegative = HalfBridge.FiresHigh(Sequence),
        };
        TrainTrajectory trajectory = Circuit.Simulate(
            circuit, Pulser(train), -planned.Pretrigger, planned.SampleInterval, planned.Samples);
        var key = new CaptureKey(Seed, Serial, fire);
        double shift = key.Jitter(BenchProbes.TriggerJitter);
        return [.. ranges.Select(range => Record(trajectory, range, key.Noise(range.Input), shift))];
    }

    private RawTrace Record(TrainTrajectory train, PlannedRange range, ulong noise, double shift)
    {
        var converter = new Digitiser(Bits, range.Span, range.Offset);
        ProbeChannel probe = Probe(range.Channel, BenchProbes.Of(range.Channel.Name()));
        short[] codes = Recorder.Record(train, probe, converter, noise, shift);
        return new RawTrace(
            range.Channel, codes, train.Start, train.Interval, converter.Step, converter.Centre, 0, converter.Lowest,
            converter.Highest);
    }
}
