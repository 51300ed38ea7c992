using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Plans;

/// <summary>Why a bench must not run a sequence at all: roles, guardian's reach, voltmeter, bleeder, load,
/// channels.</summary>
internal static class BenchRefusals
{
    private static readonly string[] _roles = ["supply", "pulser", "scope", "voltmeter", "interlock"];
    private static readonly string[] _guarded = ["supply", "pulser", "voltmeter"];

    /// <summary>All refusals of a bench.</summary>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    /// <param name="points">The points as planned.</param>
    public static IEnumerable<Problem> Of(Sequence sequence, Bench bench, IReadOnlyList<PlannedPoint> points) =>
        Roles(bench).Concat(Bleeder(bench, points)).Concat(Fixture(sequence, bench))
            .Concat(ProbeRefusals.Of(sequence, bench, points));

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

    /// <summary>A bank that its bleeder cannot bring down in the bench's own time. Judged by the highest voltage of the
    /// points, not by the envelope's: what is not charged needs no discharge.</summary>
    private static IEnumerable<Problem> Bleeder(Bench bench, IReadOnlyList<PlannedPoint> points)
    {
        double highest = points.Max(point => point.Point.BusVoltage);
        double down = bench.Safety.DownBelow(bench.BusCapacitance);
        double takes = bench.Bleeder * bench.BusCapacitance * Math.Log(highest / down);
        double within = bench.Safety.DischargeWithin;
        if (takes > within)
        {
            yield return new Problem(
                bench.Keys.GetValueOrDefault("bus.bleeder", Whole(bench)),
                $"the bleeder brings the bank from {SiText.Format(highest, "V")} to {SiText.Format(down, "V")} in "
                    + SiText.Format(takes, "s"),
                $"at most {SiText.Format(within, "s")} (safety: discharge-within)",
                "fit a bleeder of less resistance; or, where your codes allow it and a durable warning is fixed to the "
                    + "enclosure, state a longer safety: discharge-within");
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
}
