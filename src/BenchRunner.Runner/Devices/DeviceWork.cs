using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Evidence.Stores;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Points;
using BenchRunner.Runner.Sinks;
using BenchRunner.Runner.Temperatures;
using BenchRunner.Safety.Supervision;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;
using BenchRunner.Signals.Units;

namespace BenchRunner.Runner.Devices;

/// <summary>What all stations of one device's road work with: bench, plan, evidence, and what earlier stations
/// found.</summary>
public sealed class DeviceWork
{
    private readonly AnalysisSettings _stated;

    /// <summary>Makes the work of one device.</summary>
    public DeviceWork(
        string device,
        OpenBench bench,
        SafetySupervisor supervisor,
        Plan plan,
        RunWriter evidence,
        IRunSink sinks,
        EventSource events,
        TimeProvider time)
    {
        Device = device;
        Bench = bench;
        Supervisor = supervisor;
        Plan = plan;
        Evidence = evidence;
        Sinks = sinks;
        Events = events;
        Time = time;
        Bus = new BusCharge(bench, plan.Bench, supervisor, time);
        Firing = new TrainFiring(bench, supervisor, events, time);
        Plate = new Plate(bench.Hotplate, plan.Bench.Ambient, events, time);
        _stated = Planner.AnalysisSettingsOf(plan.Bench, plan.Sequence);
    }

    /// <summary>Serial.</summary>
    public string Device { get; }

    /// <summary>The instruments.</summary>
    public OpenBench Bench { get; }

    /// <summary>Grants permits.</summary>
    public SafetySupervisor Supervisor { get; }

    /// <summary>What is to be done.</summary>
    public Plan Plan { get; }

    /// <summary>The run in the evidence.</summary>
    public RunWriter Evidence { get; }

    /// <summary>Who follows the run.</summary>
    public IRunSink Sinks { get; }

    /// <summary>Where it says what happens.</summary>
    public EventSource Events { get; }

    /// <summary>The clock.</summary>
    public TimeProvider Time { get; }

    /// <summary>The bus.</summary>
    public BusCharge Bus { get; }

    /// <summary>Pulser and scope together.</summary>
    public TrainFiring Firing { get; }

    /// <summary>The plate under the device.</summary>
    public Plate Plate { get; }

    /// <summary>What the zero capture said; null before it.</summary>
    public ZeroReading? Zero { get; set; }

    /// <summary>How much longer than set the proving train's pulses were, s.</summary>
    public double ShownLonger { get; set; }

    /// <summary>What the analysis takes as given: the files, and the offsets of the zero capture.</summary>
    public AnalysisSettings Settings => Zero?.ApplyTo(_stated) ?? _stated;

    /// <summary>How far a permit for a point goes: its own voltage, and pulses as long as they may be corrected.</summary>
    public PermitBounds Bounds(PlannedPoint planned)
    {
        ArgumentNullException.ThrowIfNull(planned);
        OperatingPoint point = planned.Point;
        double longest = Math.Max(planned.FirstPulse * (1 + WidthCorrection.InAll), point.SecondPulse);
        return new PermitBounds(
            point.Name, new Volts(point.BusVoltage), new Amperes(Plan.Bench.ChargingCurrent),
            new Seconds(Math.Min(longest, Plan.Bench.Envelope.Pulse)), new Volts(point.GateOn),
            new Volts(point.GateOff));
    }

    /// <summary>A train for the pulser.</summary>
    public static TrainSettings Train(TrainSet set)
    {
        ArgumentNullException.ThrowIfNull(set);
        return new TrainSettings(
            new Seconds(set.First), new Seconds(set.Gap), new Seconds(set.Second), new Volts(set.GateOn),
            new Volts(set.GateOff));
    }

    /// <summary>The scope's settings for a point.</summary>
    /// <param name="planned">The point.</param>
    /// <param name="ranges">The ranges in force.</param>
    public ScopeSettings Scope(PlannedPoint planned, IReadOnlyList<PlannedRange> ranges)
    {
        ArgumentNullException.ThrowIfNull(planned);
        Channel gate = HalfBridge.Playing(Channel.VgsLow, HalfBridge.FiresHigh(Plan.Sequence));
        return new ScopeSettings(
            new Seconds(planned.SampleInterval),
            planned.Samples,
            new Seconds(planned.Pretrigger),
            gate,
            0.5 * (planned.Point.GateOn + planned.Point.GateOff),
            [.. ranges.Select(range => new ScopeChannelSettings(
                range.Channel, range.Input, range.Span, range.Offset,
                Plan.Bench.Channels.First(setup => setup.Channel == range.Channel).Attenuation))]);
    }
}
