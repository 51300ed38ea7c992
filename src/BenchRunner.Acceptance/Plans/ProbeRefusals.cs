using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Plans;

/// <summary>Why the probes of a bench must not be used for a sequence, and what they leave unsaid.</summary>
internal static class ProbeRefusals
{
    private const string GroundReferenced = "ground-referenced";
    private const string ShuntProbe = "shunt";

    /// <summary>Rise time (10 % to 90 %) times bandwidth of a single pole, 1: common practice.</summary>
    private const double RiseTimesBandwidth = 0.35;

    /// <summary>
    /// Share of the fastest edge up to which a probe's own rise time hardly counts, 1: a third lengthens an edge by
    /// 5 %, since rise times add in quadrature (common practice).
    /// </summary>
    private const double FastEnough = 1.0 / 3;

    /// <summary>All refusals of the probes.</summary>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    /// <param name="points">The points as planned.</param>
    public static IEnumerable<Problem> Of(Sequence sequence, Bench bench, IReadOnlyList<PlannedPoint> points) =>
        bench.Channels
            .SelectMany(setup => Earthed(setup, bench)
                .Concat(Beyond(setup, bench, points))
                .Concat(Slow(setup, sequence)))
            .Concat(bench.Channels.SelectMany(Exact))
            .Concat(Earths(bench));

    /// <summary>What a probe leaves unsaid, and what it does to an edge: nothing of it refuses.</summary>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    /// <remarks>
    /// A rating that is not stated cannot be checked, which is not the same as held: the plan says so, the person
    /// looks.
    /// </remarks>
    public static IEnumerable<Problem> Notes(Sequence sequence, Bench bench)
    {
        foreach (ChannelSetup setup in bench.Channels)
        {
            string name = setup.Channel.Name();
            string[] unsaid =
            [
                .. setup.Rating is null ? ["rating"] : Array.Empty<string>(),
                .. setup.CommonMode is null && Floats(setup.Channel, bench) ? ["common-mode"] : Array.Empty<string>(),
                .. setup.Bandwidth is null && Swings(setup.Channel) ? ["bandwidth"] : Array.Empty<string>(),
            ];
            if (unsaid.Length > 0)
            {
                yield return new Problem(
                    setup.Where, $"the probe of {name} states no {string.Join(" and no ", unsaid)}",
                    "what its data sheet says; what is not stated is not checked",
                    "state it, and until then look yourself whether the probe bears the bus");
            }

            double edge = sequence.Expected.FastestEdge;
            if (Swings(setup.Channel) && Rise(setup) is { } rise && rise > FastEnough * edge && rise <= edge)
            {
                double longer = Math.Sqrt(1 + (rise / edge * rise / edge)) - 1;
                yield return new Problem(
                    setup.Where,
                    $"the probe of {name} rises in {SiText.Format(rise, "s", 3)} and lengthens the fastest edge of "
                    + $"{SiText.Format(edge, "s")} by {SiText.Percent(longer, 2)}",
                    $"at most {SiText.Format(FastEnough * edge, "s", 3)} where its times and slopes are to be exact",
                    "use a faster probe, or count this into the uncertainty");
            }
        }
    }

    /// <summary>
    /// Whether a channel's conductor swings with the bus against the negative rail, where the bench is earthed.
    /// </summary>
    private static bool Floats(Channel channel, Bench bench) =>
        channel is Channel.VgsHigh or Channel.VdsHigh or Channel.IdHigh
        || (channel == Channel.ILoad && bench.LoadToPositive);

    /// <summary>Whether a channel has the edges of the switching: bus and load current have none.</summary>
    private static bool Swings(Channel channel) => channel is not (Channel.Vbus or Channel.ILoad);

    private static double? Rise(ChannelSetup setup) => RiseTimesBandwidth / setup.Bandwidth;

    private static IEnumerable<Problem> Earthed(ChannelSetup setup, Bench bench)
    {
        if (Floats(setup.Channel, bench) && setup.Probe is GroundReferenced or ShuntProbe)
        {
            yield return new Problem(
                setup.Where, $"{setup.Channel.Name()} has a {setup.Probe} probe",
                "a differential or isolated one (or a coil, transformer or clamp): "
                + "its conductor swings with the bus",
                "use such a probe");
        }
    }

    private static IEnumerable<Problem> Beyond(ChannelSetup setup, Bench bench, IReadOnlyList<PlannedPoint> points)
    {
        string name = setup.Channel.Name();
        if (points.Count == 0)
        {
            yield break;
        }

        double highest = Highest(setup.Channel, points);
        if (setup.Rating is { } rating && highest > rating)
        {
            string unit = setup.Channel.Unit();
            yield return new Problem(
                setup.Where,
                $"the probe of {name} is rated {SiText.Format(rating, unit)} and sees {SiText.Format(highest, unit)}",
                "a probe rated for what it sees, the second turn-off included",
                "use another probe or lower the point");
        }

        double swing = points.Max(planned => planned.Off2PeakVoltage);
        if (Floats(setup.Channel, bench) && setup.CommonMode is { } bears && swing > bears)
        {
            yield return new Problem(
                setup.Where,
                $"the inputs of {name} bear {SiText.Format(bears, "V", 4)} to earth and swing to "
                + $"{SiText.Format(swing, "V", 4)}",
                "a common-mode rating of at least bus and overshoot, the second turn-off included",
                "use another probe or lower the point");
        }
    }

    private static IEnumerable<Problem> Slow(ChannelSetup setup, Sequence sequence)
    {
        double edge = sequence.Expected.FastestEdge;
        if (Swings(setup.Channel) && Rise(setup) is { } rise && rise > edge)
        {
            yield return new Problem(
                setup.Where,
                $"the probe of {setup.Channel.Name()} rises in {SiText.Format(rise, "s", 3)} "
                + $"({RiseTimesBandwidth} over {SiText.Format(setup.Bandwidth!.Value, "Hz")})",
                $"at most the fastest edge of {SiText.Format(edge, "s")}: a slower probe measures itself",
                "use a faster probe, or state the edge that is expected");
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
        bool AtEarth(ChannelSetup setup) => setup.Probe == GroundReferenced;
        ChannelSetup? source = bench.Channels.FirstOrDefault(
            setup => AtEarth(setup) && (setup.Channel is Channel.VgsLow or Channel.VdsLow));
        ChannelSetup? rail = bench.Channels.FirstOrDefault(
            setup => (AtEarth(setup) && setup.Channel == Channel.Vbus)
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

    /// <summary>The largest magnitude that a probe sees at any point.</summary>
    private static double Highest(Channel channel, IReadOnlyList<PlannedPoint> points) => channel switch
    {
        Channel.Vbus => points.Max(planned => planned.Point.BusVoltage),
        Channel.VdsLow or Channel.VdsHigh => points.Max(planned => planned.Off2PeakVoltage),
        Channel.IdLow or Channel.IdHigh or Channel.ILoad => points.Max(planned => planned.Off2Current),
        _ => points.Max(planned => Math.Max(Math.Abs(planned.Point.GateOn), Math.Abs(planned.Point.GateOff))),
    };
}
