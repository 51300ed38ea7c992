using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;
using FakeBench.Physics;
using FakeBench.Probes;
using HalfBridge = BenchRunner.Acceptance.Plans.HalfBridge;

namespace BenchRunner.Acceptance.Tests.Physics;

/// <summary>
/// Each criterion fires, alone, on a bench whose one flaw is in circuit, pulser or probe; none fires on a sound one.
/// </summary>
/// <remarks>Flaws that lie in the wire between scope and computer are in the tests of the single criteria.</remarks>
public sealed class LoneFlawTests
{
    private static readonly PlannedPoint _rated = Shipped.Point(Shipped.Rated, Shipped.Bench);

    private static readonly FiredBench _sound = new(Shipped.Rated, Shipped.Bench);

    /// <summary>Flaw, criterion, class, and the channel to blame.</summary>
    public static TheoryData<string, string, FindingClass, Channel?> Flaws => new()
    {
        { "vds_high reads too much", Criteria.NotClipped, FindingClass.Retry, Channel.VdsHigh },
        { "vds_high reads a tenth", Criteria.RangeUsed, FindingClass.Retry, Channel.VdsHigh },
        { "second pulse too long", Criteria.TwoPulses, FindingClass.Stop, Channel.VgsLow },
        { "second pulse too short", Criteria.TwoPulses, FindingClass.Retry, Channel.VgsLow },
        { "current probe drifts", Criteria.Baseline, FindingClass.Retry, Channel.IdLow },
        { "inductor 5 % high", Criteria.CurrentWithin, FindingClass.Retry, Channel.IdLow },
        { "inductor 5 % low", Criteria.CurrentWithin, FindingClass.Retry, Channel.IdLow },
        { "bus not back", Criteria.BusWithin, FindingClass.Retry, Channel.Vbus },
        { "bank too small", Criteria.BusDroop, FindingClass.Retry, Channel.Vbus },
        { "inductor bends", Criteria.RampStraightness, FindingClass.Retry, Channel.IdLow },
        { "inductor saturates", Criteria.RampStraightness, FindingClass.Stop, Channel.IdLow },
        { "high gate not held", Criteria.HighSideOff, FindingClass.Stop, Channel.VgsHigh },
        { "switch not fully on", Criteria.Desaturated, FindingClass.Stop, Channel.VdsLow },
        { "gap too short", Criteria.Settled, FindingClass.Retry, null },
        { "vds_high noisy", Criteria.NoiseBelow, FindingClass.Retry, Channel.VdsHigh },
        { "vds_low reads 4 % much", Criteria.BusAgrees, FindingClass.Stop, Channel.VdsLow },
        { "gate on too low", Criteria.GateLevels, FindingClass.Retry, Channel.VgsLow },
        { "gate off too low", Criteria.GateLevels, FindingClass.Retry, Channel.VgsLow },
        { "gate off too high", Criteria.GateLevels, FindingClass.Stop, Channel.VgsLow },
    };

    [Theory]
    [MemberData(nameof(Flaws))]
    public void A_flaw_is_found_by_its_criterion_alone(
        string flaw, string criterion, FindingClass does, Channel? channel)
    {
        Verdict verdict = Judge(Flawed(flaw), _rated);
        string all = string.Join('\n', verdict.Findings.Select(finding => finding.Message));
        Assert.All(verdict.Findings, finding => Assert.True(finding.Criterion == criterion, all));
        Finding found = Assert.Single(verdict.Findings);
        Assert.Equal((does, channel), (found.Class, found.Channel));
        Assert.NotNull(found.Seen);
        Assert.NotNull(found.Bound);
        Assert.False(verdict.IsValid);
    }

    [Theory]
    [InlineData("W1200-0001", DevicePosition.Both)]
    [InlineData("W1200-0002", DevicePosition.Both)]
    [InlineData("W1200-0003", DevicePosition.High)]
    public void A_sound_bench_has_no_finding(string serial, DevicePosition position)
    {
        Sequence sequence = position == DevicePosition.High
            ? SequenceFile.Read(Files.Repository.PathOf("sequences", "winch-drive-high.yaml")).Value!
            : Shipped.Sequence;
        Bench bench = position == DevicePosition.High
            ? BenchFile.Read(Files.Repository.PathOf("sequences", "benches", "negative-load.yaml")).Value!
            : Shipped.Bench;
        Assert.Equal(position == DevicePosition.High, HalfBridge.FiresHigh(sequence));
        foreach (PlannedPoint planned in Planner.Plan(sequence, bench).Plan!.Points)
        {
            Verdict verdict = Judge(new FiredBench(sequence, bench) { Serial = serial }, planned);
            Assert.Empty(verdict.Findings.Select(finding => finding.Message));
            Assert.Equal([Criteria.TemperatureWithin], verdict.NotEvaluated);
        }
    }

    [Fact]
    public void A_correction_brings_the_current_to_its_target()
    {
        Verdict verdict = Judge(Flawed("inductor 5 % high"), _rated);
        Assert.Equal(1.05, verdict.CorrectedFirstPulse!.Value / _rated.FirstPulse, 0.005);
        Verdict next = CaptureValidity.Judge(PointLoop.Context(
            Flawed("inductor 5 % high"), _rated,
            PointLoop.Start(_rated) with { First = verdict.CorrectedFirstPulse.Value }, _rated.Ranges, [], 2));
        Assert.Empty(next.Findings.Select(finding => finding.Message));
    }

    private static Verdict Judge(FiredBench bench, PlannedPoint planned)
    {
        CaptureContext context = PointLoop.Context(
            bench, planned, PointLoop.Start(planned), planned.Ranges, [], fire: 1);
        CaptureContext before = PointLoop.Context(
            new FiredBench(bench.Sequence, bench.Bench), planned, PointLoop.Start(planned), planned.Ranges, [], 0);
        return CaptureValidity.Judge(context with { Zero = PointLoop.Zero(before) });
    }

    private static FiredBench Flawed(string flaw) => flaw switch
    {
        "vds_high reads too much" => Probe(Channel.VdsHigh, probe => probe with { Gain = 1.7 }),
        "vds_high reads a tenth" => Probe(Channel.VdsHigh, probe => probe with { Gain = 0.1 }),
        "vds_high noisy" => Probe(Channel.VdsHigh, probe => probe with { Noise = 20 }),
        "vds_low reads 4 % much" => Probe(Channel.VdsLow, probe => probe with { Gain = 1.04 }),
        "current probe drifts" => Probe(Channel.IdLow, probe => probe with { Offset = probe.Offset + 0.6 }),
        "second pulse too long" => Pulser(train => train with { SecondPulse = 1.05 * train.SecondPulse }),
        "second pulse too short" => Pulser(train => train with { SecondPulse = 0.95 * train.SecondPulse }),
        "gap too short" => Pulser(train => train with { Gap = 0.7e-6 }),
        "high gate not held" => Pulser(train => train with { HeldOff = 0 }),
        "gate on too low" => Pulser(train => train with { GateOn = train.GateOn - 0.8 }),
        "gate off too low" => Pulser(train => train with { GateOff = train.GateOff - 0.8 }),
        "gate off too high" => Pulser(train => train with { GateOff = train.GateOff + 0.8 }),
        "inductor 5 % high" => Fixture(parts => parts with { LoadInductance = 1.05 * parts.LoadInductance }),
        "inductor 5 % low" => Fixture(parts => parts with { LoadInductance = 0.95 * parts.LoadInductance }),
        "bank too small" => Fixture(parts => parts with { BankCapacitance = 8e-6 }),

        // Saturation that bends a ramp by 2 % makes its slope grow by over 20 %, a stop: a sequence that asks for less
        // bend takes again what grows less.
        "inductor bends" => Fixture(parts => parts with { SaturationFlux = 6.8e-3 }) with
        {
            Sequence = Shipped.Rated with { Validity = new ValidityBounds { RampStraightness = 0.012 } },
        },
        "inductor saturates" => Fixture(Saturating),
        "bus not back" => _sound with { BusShare = _ => 0.985 },
        "switch not fully on" => _sound with
        {
            // Its resistance takes from the ramp what the inductor, 4 % low, gives it.
            Part = device => device with
            {
                Low = device.Low with { Switch = device.Low.Switch with { DrainResistance = 1.2 } },
            },
            Fixture = parts => parts with { LoadInductance = 0.96 * parts.LoadInductance },
        },
        _ => throw new ArgumentException(flaw, nameof(flaw)),
    };

    /// <summary>Its fitted ramp still meets the target at the end of the first pulse: the bend alone is
    /// wrong.</summary>
    private static BenchParts Saturating(BenchParts parts)
    {
        const double flux = 6.2e-3;

        // L · I is 4.8 mWb; a straight line through iL = φ/L (1 + (φ/φs)⁸) ends about a quarter of the excess above
        // φ/L.
        double more = 1 + (0.25 * Math.Pow(4.8e-3 / flux, 8));
        return parts with { SaturationFlux = flux, LoadInductance = more * parts.LoadInductance };
    }

    private static FiredBench Pulser(Func<FakeBench.Physics.PulseTrain, FakeBench.Physics.PulseTrain> flaw) =>
        _sound with { Pulser = flaw };

    private static FiredBench Fixture(Func<BenchParts, BenchParts> flaw) => _sound with { Fixture = flaw };

    private static FiredBench Probe(Channel channel, Func<ProbeChannel, ProbeChannel> flaw) =>
        _sound with { Probe = (one, probe) => one == channel ? flaw(probe) : probe };
}
