using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Analysis;

namespace BenchRunner.Acceptance.Plans;

/// <summary>
/// Makes a plan of sequence and bench: what would be done, and what refuses and why. Pure: no clock, no disk.
/// </summary>
public static class Planner
{
    /// <summary>
    /// Damping ratio by which the decay of a ringing is planned, 1: lower than a sound commutation loop's.
    /// </summary>
    private const double PlannedDamping = 0.02;

    /// <summary>Share of its first swing at which a ringing counts as decayed, 1.</summary>
    private const double DecayedTo = 0.01;

    /// <summary>Plans a run of one device.</summary>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    /// <returns>The plan as far as it could be formed, and every refusal; no plan for a sequence without
    /// points.</returns>
    public static Planned Plan(Sequence sequence, Bench bench)
    {
        ArgumentNullException.ThrowIfNull(sequence);
        ArgumentNullException.ThrowIfNull(bench);
        if (sequence.OperatingPoints.Count == 0)
        {
            return new Planned(null, [new Problem(
                new Place(sequence.Source.Path, 0, 0), "there is no operating point", "at least one",
                "add operating-points")]);
        }

        var points = new List<PlannedPoint>();
        var refusals = new List<Problem>();
        foreach (OperatingPoint point in Ordered(sequence, bench))
        {
            (PlannedPoint planned, PulseTrain train, Sampling sampling) = PlanPoint(point, sequence, bench);
            points.Add(planned);
            refusals.AddRange(PointRefusals.Of(planned, train, sequence, bench));
            refusals.AddRange(RecordRefusals.Of(planned, sampling, bench));
        }

        refusals.AddRange(LimitRefusals.Of(sequence, bench));
        refusals.AddRange(BenchRefusals.Of(sequence, bench, points));
        var plan = new Plan(
            sequence, bench, points, RunCost.Duration(points, sequence, bench), RunCost.Bytes(points, sequence, bench))
        {
            Proving = PlanPoint(ProvingTrain.Point(sequence), sequence, bench, isProving: true).Planned,
        };
        return new Planned(plan, [.. refusals.OrderBy(problem => problem.Where.File, StringComparer.Ordinal)
            .ThenBy(problem => problem.Where.Line).ThenBy(problem => problem.Where.Column)])
        {
            Notes = [.. ProbeRefusals.Notes(sequence, bench)],
        };
    }

    /// <summary>What the analysis takes as given when it reads captures of this bench for this sequence.</summary>
    /// <param name="bench">The bench: stated channel errors, shunt, threshold.</param>
    /// <param name="sequence">The sequence: kind, position, forward voltage, definitions asked for.</param>
    /// <remarks>Every definition is formed where the limits ask for more than one of a quantity.</remarks>
    public static AnalysisSettings AnalysisSettingsOf(Bench bench, Sequence sequence)
    {
        ArgumentNullException.ThrowIfNull(bench);
        ArgumentNullException.ThrowIfNull(sequence);
        var definitions = new Dictionary<string, string>(sequence.Definitions);
        bool several = false;
        foreach (Limit limit in sequence.Limits.Where(limit => limit.Definition is not null))
        {
            several |= sequence.Limits.Any(
                other => other.Quantity == limit.Quantity && other.Definition != limit.Definition);
            definitions[limit.Quantity] = limit.Definition!;
        }

        return new AnalysisSettings
        {
            Kind = sequence.Kind,
            Position = HalfBridge.FiresHigh(sequence) ? DevicePosition.High
                : sequence.Position == DevicePosition.Both ? DevicePosition.Both : DevicePosition.Low,
            Corrections = bench.Channels.ToDictionary(
                setup => setup.Channel, setup => setup.Correction),
            Shunt = bench.Shunt,
            ForwardVoltage = sequence.Expected.ForwardVoltage,
            HighSideThreshold = bench.HighSideThreshold,
            IntegrationTime = sequence.IntegrationTime,
            Definitions = several ? sequence.Definitions : definitions,
            EveryDefinition = several,
        };
    }

    private static IEnumerable<OperatingPoint> Ordered(Sequence sequence, Bench bench) => sequence.AsWritten
        ? sequence.OperatingPoints
        : sequence.OperatingPoints
            .OrderBy(point => point.Temperature ?? bench.Ambient)
            .ThenBy(point => point.BusVoltage)
            .ThenBy(point => point.LoadCurrent);

    private static (PlannedPoint Planned, PulseTrain Train, Sampling Sampling) PlanPoint(
        OperatingPoint point, Sequence sequence, Bench bench, bool isProving = false)
    {
        PulseTrain train = PulseTrain.Of(point, sequence, bench);
        double first = train.FirstPulse ?? (bench.LoadInductance * point.LoadCurrent / point.BusVoltage);
        Sampling sampling = Sampling.Of(point, first, sequence, bench);
        double ring = 2 * Math.PI * sequence.Expected.RingFrequency;
        var planned = new PlannedPoint
        {
            Point = point,
            FirstPulse = first,
            StoredEnergy = 0.5 * bench.BusCapacitance * point.BusVoltage * point.BusVoltage,
            LoadEnergy = 0.5 * bench.LoadInductance * train.Off2Current * train.Off2Current,
            BusDroop = train.Droop,
            JunctionRise = JunctionHeating.Rise(point, train, sequence, bench),
            Off2Current = train.Off2Current,
            Off2PeakVoltage = train.Off2PeakVoltage,
            SampleInterval = sampling.Interval,
            Samples = sampling.Samples,
            Pretrigger = sampling.Pretrigger,
            Ranges = Ranges.Of(point, train, sequence, bench, isProving),
            Recovery = train.LoadDecay + train.Recharge,
            RingDecay = Math.Log(1 / DecayedTo) / (PlannedDamping * ring),
        };
        return (planned, train, sampling);
    }
}
