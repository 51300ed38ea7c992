using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Plans;

/// <summary>Why a bench must not run a sequence at all: roles, guardian's reach, voltmeter, load, channels.</summary>
internal static class BenchRefusals
{
    private static readonly string[] _roles = ["supply", "pulser", "scope", "voltmeter", "interlock"];
    private static readonly string[] _guarded = ["supply", "pulser", "voltmeter"];

    /// <summary>All refusals of a bench.</summary>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    /// <param name="points">The points as planned.</param>
    public static IEnumerable<Problem> Of(Sequence sequence, Bench bench, IReadOnlyList<PlannedPoint> points) =>
        Roles(bench).Concat(Fixture(sequence, bench))
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
