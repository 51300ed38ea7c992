using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Plans;

/// <summary>Why a bench must not run a sequence at all: roles, guardian's reach, voltmeter, load, probes.</summary>
internal static class BenchRefusals
{
    private const string GroundReferenced = "ground-referenced";
    private const string ShuntProbe = "shunt";

    private static readonly string[] _roles = ["supply", "pulser", "scope", "voltmeter", "interlock"];
    private static readonly string[] _guarded = ["supply", "pulser", "voltmeter"];

    /// <summary>All refusals of a bench.</summary>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    /// <param name="points">The points as planned.</param>
    public static IEnumerable<Problem> Of(Sequence sequence, Bench bench, IReadOnlyList<PlannedPoint> points) =>
        Roles(bench).Concat(Fixture(sequence, bench)).Concat(Probes(bench, points));

    private static Place Whole(Bench bench) => new(bench.Source.Path, 0, 0);

    private static IEnumerable<Problem> Roles(Bench bench)
    {
        foreach (string role in _roles.Where(role => !bench.Roles.ContainsKey(role)))
        {
            yield return new Problem(
                Whole(bench), $"bench {bench.Name} has no {role}", $"the roles {string.Join(", ", _roles)}",
                $"add roles: {role}");
        }

        foreach (string role in _guarded)
        {
            if (bench.Roles.TryGetValue(role, out InstrumentSetup? setup) && setup.Connections < 2)
            {
                yield return new Problem(
                    setup.Where, $"{role} serves one connection",
                    "at least 2, so that the guardian reaches it when the runner hangs",
                    "state connections: 2 where the instrument can, or choose another instrument or link");
            }
        }

        if (bench.Roles.TryGetValue("voltmeter", out InstrumentSetup? voltmeter) && voltmeter.At != "bank")
        {
            yield return new Problem(
                voltmeter.Where,
                voltmeter.At is null ? "the voltmeter states no place" : $"the voltmeter is at {voltmeter.At}",
                "at: bank, the bank's own terminals: only there does it prove that the bank is empty",
                "connect it there and write at: bank");
        }
    }

    private static IEnumerable<Problem> Fixture(Sequence sequence, Bench bench)
    {
        bool firesHigh = HalfBridge.FiresHigh(sequence);
        if (firesHigh == bench.LoadToPositive)
        {
            yield return new Problem(
                sequence.Keys.GetValueOrDefault("position", new Place(sequence.Source.Path, 0, 0)),
                $"the {(firesHigh ? "high" : "low")} switch fires and the load of bench {bench.Name} goes to the "
                + $"{(bench.LoadToPositive ? "positive" : "negative")} rail",
                $"a load to the {(firesHigh ? "negative" : "positive")} rail",
                "change the position, or connect the load to the other rail and say so in the bench file");
        }

        foreach (Channel needed in new[] { Channel.VgsLow, Channel.VdsLow, Channel.IdLow })
        {
            Channel channel = HalfBridge.Playing(needed, firesHigh);
            if (!HalfBridge.Recorded(bench).Contains(channel))
            {
                yield return new Problem(
                    Whole(bench), $"bench {bench.Name} does not record {channel.Name()}",
                    "gate, voltage and current of the switch that fires: without them no capture can be judged",
                    $"add channels: {channel.Name()}");
            }
        }
    }

    private static IEnumerable<Problem> Probes(Bench bench, IReadOnlyList<PlannedPoint> points)
    {
        foreach (ChannelSetup setup in bench.Channels)
        {
            bool floating = setup.Channel is Channel.VgsHigh or Channel.VdsHigh or Channel.IdHigh;
            if (floating && (setup.Probe is GroundReferenced or ShuntProbe))
            {
                yield return new Problem(
                    setup.Where, $"{setup.Channel.Name()} has a {setup.Probe} probe",
                    "a differential or isolated one (or a coil, transformer or clamp): "
                    + "the high side swings with the bus",
                    "use such a probe");
            }

            if (setup.Rating is { } rating && Highest(setup.Channel, points) is { } highest && highest > rating)
            {
                string unit = setup.Channel.Unit();
                yield return new Problem(
                    setup.Where,
                    $"the probe of {setup.Channel.Name()} is rated {SiText.Format(rating, unit)} and sees "
                    + $"{SiText.Format(highest, unit)}",
                    "a probe rated for what it sees, the second turn-off included",
                    "use another probe or lower the point");
            }
        }

        foreach (Problem problem in bench.Channels.SelectMany(Exact).Concat(Earths(bench)))
        {
            yield return problem;
        }
    }

    /// <summary>
    /// An error of a channel that is stated as certain would make every value look better than it is.
    /// </summary>
    private static IEnumerable<Problem> Exact(ChannelSetup setup) =>
        new (string Error, double Uncertainty)[]
        {
            ("gain", setup.GainUncertainty), ("offset", setup.OffsetUncertainty), ("skew", setup.SkewUncertainty),
        }
        .Where(stated => !(stated.Uncertainty > 0))
        .Select(stated => new Problem(
            setup.Where, $"{setup.Channel.Name()} states no uncertainty of its {stated.Error}",
            "more than 0: no channel is exact",
            $"state uncertainty: {stated.Error} from the calibration or the data sheet"));

    /// <summary>
    /// A scope's inputs share one earth: earth-referenced probes at two points join them through the scope.
    /// </summary>
    private static IEnumerable<Problem> Earths(Bench bench)
    {
        bool Earthed(ChannelSetup setup) => setup.Probe == GroundReferenced;
        ChannelSetup? source = bench.Channels.FirstOrDefault(
            setup => Earthed(setup) && (setup.Channel is Channel.VgsLow or Channel.VdsLow));
        ChannelSetup? rail = bench.Channels.FirstOrDefault(
            setup => (Earthed(setup) && setup.Channel == Channel.Vbus)
                || (setup.Probe == ShuntProbe && setup.Channel == Channel.IdLow));
        if (bench.Shunt is not null && source is not null && rail is not null)
        {
            yield return new Problem(
                rail.Where,
                $"{source.Channel.Name()} is earthed at the low source and {rail.Channel.Name()} at the negative rail",
                "one earth point: the scope's earth would lie across the shunt",
                "measure one of the two with a differential or isolated probe");
        }
    }

    /// <summary>The largest magnitude that a probe sees at any point; null where nothing is planned.</summary>
    private static double? Highest(Channel channel, IReadOnlyList<PlannedPoint> points)
    {
        if (points.Count == 0)
        {
            return null;
        }

        return channel switch
        {
            Channel.Vbus => points.Max(planned => planned.Point.BusVoltage),
            Channel.VdsLow or Channel.VdsHigh => points.Max(planned => planned.Off2PeakVoltage),
            Channel.IdLow or Channel.IdHigh or Channel.ILoad => points.Max(planned => planned.Off2Current),
            _ => points.Max(planned => Math.Max(Math.Abs(planned.Point.GateOn), Math.Abs(planned.Point.GateOff))),
        };
    }
}
