using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Uncertainty;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Plans;

/// <summary>
/// Why a limit must not be decided on: unknown, used by a criterion, a companion's, not measured, undecidable.
/// </summary>
internal static class LimitRefusals
{
    /// <summary>All refusals of the limits of a sequence.</summary>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    public static IEnumerable<Problem> Of(Sequence sequence, Bench bench) =>
        sequence.Limits.SelectMany(limit => Of(limit, sequence, bench)).Concat(Twice(sequence));

    private static IEnumerable<Problem> Of(Limit limit, Sequence sequence, Bench bench)
    {
        if (QuantityCatalogue.Find(limit.Quantity) is not { } quantity)
        {
            yield return new Problem(
                limit.Where, $"a limit stands on {limit.Quantity}", "a quantity of the catalogue",
                "see benchrunner quantities");
            yield break;
        }

        if (Criteria.All.FirstOrDefault(criterion => criterion.Uses.Contains(limit.Quantity)) is { } user)
        {
            yield return new Problem(
                limit.Where, $"a limit stands on {limit.Quantity}, which the validity criterion {user.Name} uses",
                "a quantity by which no capture is chosen: captures must not be selected by what is decided on",
                $"state a bound for {user.Name} instead");
        }

        if (!HalfBridge.IsUnderTest(sequence, quantity.Owner))
        {
            yield return new Problem(
                limit.Where,
                $"a limit stands on {limit.Quantity}, which belongs to the companion",
                $"a quantity of the device under test or of the circuit (position: {Name(sequence.Position)})",
                "remove it, or test the device in the other position");
        }

        string id = Id(limit, quantity, sequence);
        if (quantity.Find(id) is not { } definition)
        {
            yield return new Problem(
                limit.Where, $"a limit on {limit.Quantity} asks for the definition {id}",
                $"one of {string.Join(", ", quantity.Definitions.Select(known => known.Id))}",
                "see benchrunner quantities");
            yield break;
        }

        foreach (Problem problem in Recorded(limit, id, definition, sequence, bench)
            .Concat(Decidable(limit, sequence, bench)))
        {
            yield return problem;
        }
    }

    /// <summary>A limit that names the definition which another takes by default: one value, two limits.</summary>
    private static IEnumerable<Problem> Twice(Sequence sequence)
    {
        var lines = new Dictionary<(string At, string Quantity, string Rule), int>();
        foreach (Limit limit in sequence.Limits)
        {
            if (QuantityCatalogue.Find(limit.Quantity) is not { } quantity)
            {
                continue;
            }

            var key = (limit.At, limit.Quantity, DefinitionId.Split(Id(limit, quantity, sequence)).Rule);
            if (!lines.TryAdd(key, limit.Where.Line))
            {
                yield return new Problem(
                    limit.Where,
                    $"a second limit on {limit.Quantity} at {limit.At} by {key.Rule}",
                    $"one limit on a value (first in line {lines[key]})",
                    "bring the two together, e.g. with between, or remove one");
            }
        }
    }

    private static string Id(Limit limit, Quantity quantity, Sequence sequence) =>
        limit.Definition ?? sequence.Definitions.GetValueOrDefault(limit.Quantity) ?? quantity.DefaultFor(sequence.Kind);

    private static IEnumerable<Problem> Recorded(
        Limit limit, string id, QuantityDefinition definition, Sequence sequence, Bench bench)
    {
        bool firesHigh = HalfBridge.FiresHigh(sequence);
        IReadOnlyCollection<Channel> recorded = HalfBridge.Recorded(bench);
        IReadOnlyList<Channel> missing = HalfBridge.Missing(definition, recorded, firesHigh);
        if (missing.Count > 0)
        {
            yield return new Problem(
                limit.Where, $"a limit stands on {limit.Quantity}",
                $"a quantity that bench {bench.Name} can measure: {id} needs "
                + $"{string.Join(" and ", missing.Select(c => c.Name()))}",
                "remove it or choose a bench that records the channel");
        }

        bool measured = recorded.Contains(HalfBridge.Playing(Channel.IdHigh, firesHigh));
        if (DefinitionId.Split(id).ByLoadLine && measured)
        {
            yield return new Problem(
                limit.Where, $"a limit on {limit.Quantity} asks for {id}",
                $"the route of bench {bench.Name}, which measures the diode's current itself",
                $"write {DefinitionId.Split(id).Rule}, or choose a bench without that channel");
        }
    }

    /// <summary>A guarded limit on both sides needs room between its guard bands.</summary>
    private static IEnumerable<Problem> Decidable(Limit limit, Sequence sequence, Bench bench)
    {
        if (!sequence.Decision.Guarded || limit.Lower is not { } lower || limit.Upper is not { } upper
            || StatedUncertainty.Of(limit.Quantity, (lower + upper) / 2, sequence, bench) is not { } standard)
        {
            yield break;
        }

        double guard = sequence.Decision.GuardFactor
            * StudentT.Factor(sequence.Decision.Coverage, double.PositiveInfinity) * standard;
        if (2 * guard >= upper - lower)
        {
            string unit = QuantityCatalogue.Find(limit.Quantity)!.Unit;
            yield return new Problem(
                limit.Where,
                $"the limits on {limit.Quantity} are {SiText.Format(upper - lower, unit, 3)} apart, "
                + $"the two guard bands take {SiText.Format(2 * guard, unit, 3)}",
                "room between the guard bands: as written no device can be accepted",
                "widen the limits, use better probes or decide by rule: simple");
        }
    }

    private static string Name(Signals.Analysis.DevicePosition position) => position switch
    {
        Signals.Analysis.DevicePosition.Low => "low",
        Signals.Analysis.DevicePosition.High => "high",
        _ => "both",
    };
}
