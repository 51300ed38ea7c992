using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Plans;

/// <summary>Which criteria of validity a bench cannot evaluate for a sequence. Pure.</summary>
public static class NotEvaluatedCriteria
{
    private const string Hotplate = "hotplate";

    /// <summary>The criteria that cannot be evaluated, in the order of the catalogue.</summary>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    /// <returns>Each with its reason; one that some points alone leave open names them. What a plan refuses, such as a
    /// bench that does not record the firing switch, is not listed again.</returns>
    public static IReadOnlyList<NotEvaluated> Of(Sequence sequence, Bench bench)
    {
        ArgumentNullException.ThrowIfNull(sequence);
        ArgumentNullException.ThrowIfNull(bench);
        IReadOnlyCollection<Channel> recorded = HalfBridge.Recorded(bench);
        Channel heldOff = HalfBridge.Playing(Channel.VgsHigh, HalfBridge.FiresHigh(sequence));
        var open = new List<NotEvaluated>();
        if (!recorded.Contains(Channel.Vbus))
        {
            open.Add(new NotEvaluated(Criteria.BusDroop, $"{Channel.Vbus.Name()} is not measured"));
        }

        if (!recorded.Contains(heldOff))
        {
            open.Add(new NotEvaluated(Criteria.HighSideOff, $"{heldOff.Name()} is not measured"));
        }
        else if (bench.HighSideThreshold is null)
        {
            open.Add(new NotEvaluated(Criteria.HighSideOff, "the bench states no high-side: gate-threshold"));
        }

        if (!bench.Roles.ContainsKey(Hotplate))
        {
            open.Add(new NotEvaluated(
                Criteria.TemperatureWithin, "the bench has no hotplate: the plate is taken to be at ambient"));
        }
        else if (sequence.OperatingPoints.Any(point => point.Temperature is null))
        {
            string names = string.Join(
                ", ", sequence.OperatingPoints.Where(point => point.Temperature is null).Select(point => point.Name));
            open.Add(new NotEvaluated(Criteria.TemperatureWithin, $"{names}: at ambient, no temperature is set"));
        }

        return open;
    }
}
