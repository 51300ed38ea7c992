using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Uncertainty;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Decisions;

/// <summary>Every quantity of one operating point as mean, uncertainty and conformity.</summary>
internal static class PointValues
{
    /// <summary>Forms them: a row for each quantity that the channels allow, and one for each limit.</summary>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    /// <param name="captures">What the point gave.</param>
    public static IReadOnlyList<MeasuredValue> Of(Sequence sequence, Bench bench, PointCaptures captures)
    {
        IReadOnlyCollection<Channel> recorded = HalfBridge.Recorded(bench);
        bool firesHigh = HalfBridge.FiresHigh(sequence);
        var rows = new List<MeasuredValue>();
        foreach (Quantity quantity in QuantityCatalogue.All)
        {
            bool limited = false;
            foreach (Limit limit in sequence.Limits)
            {
                if (limit.Quantity == quantity.Name && limit.At == captures.OperatingPoint)
                {
                    limited = true;
                    rows.Add(Row(quantity, limit, sequence, captures));
                }
            }

            if (!limited)
            {
                MeasuredValue row = Row(quantity, null, sequence, captures);
                if (quantity.Find(row.Definition) is { } definition
                    && HalfBridge.Missing(definition, recorded, firesHigh).Count == 0)
                {
                    rows.Add(row);
                }
            }
        }

        return rows;
    }

    private static MeasuredValue Row(Quantity quantity, Limit? limit, Sequence sequence, PointCaptures captures)
    {
        string? asked = limit?.Definition ?? sequence.Definitions.GetValueOrDefault(quantity.Name);
        string wanted = asked ?? quantity.DefaultFor(sequence.Kind);
        string definition = wanted;
        var values = new List<double>();
        var reasons = new List<string>();
        foreach (IReadOnlyList<QuantityValue> capture in captures.Valid.Select(valid => valid.Quantities))
        {
            QuantityValue? found = capture.FirstOrDefault(value =>
                value.Quantity == quantity.Name && Is(value.Definition, wanted))
                ?? (asked is null ? capture.FirstOrDefault(value => value.Quantity == quantity.Name) : null);
            definition = found?.Definition ?? definition;
            if (found?.Value is { } value)
            {
                values.Add(value);
            }
            else
            {
                reasons.Add(found?.Reason ?? $"{wanted} was not formed");
            }
        }

        var row = new MeasuredValue(
            captures.OperatingPoint, quantity.Name, definition, null, quantity.Unit, null, null, null, null,
            values.Count, limit?.Lower, limit?.Upper, limit is null ? null : Conformity.Undecided, null);

        // A quantity that most captures do not show has no value: the few that show it would be a choice by the
        // measurand.
        return 2 * values.Count > captures.Valid.Count
            ? Measured(row, values, captures.Budget?.Find(quantity.Name, definition), sequence.Decision)
            : row with { Reason = Why(reasons, captures.Valid.Count) };
    }

    private static MeasuredValue Measured(
        MeasuredValue row, List<double> values, QuantityBudget? budget, DecisionRule rule)
    {
        Spread spread = Spread.Of(values);
        string? unknown = values.Count < 2 ? "one capture: its spread is not known"
            : budget is null ? "no budget of the bench"
            : budget.Reason;
        if (unknown is null)
        {
            CombinedUncertainty combined = CombinedUncertainty.Of(
                [.. budget!.Entries,
                    new UncertaintyEntry("spread of the captures", spread.OfMean, 1, spread.Count - 1)],
                rule.Coverage);
            row = row with
            {
                StandardUncertainty = combined.Standard,
                ExpandedUncertainty = combined.Expanded,
                CoverageFactor = combined.CoverageFactor,
                DegreesOfFreedom = combined.DegreesOfFreedom,
            };
        }

        Conformity? conformity = row.Conformity is null
            ? null
            : ConformityRule.Decide(spread.Mean, row.ExpandedUncertainty, row.Lower, row.Upper, rule);
        return row with
        {
            Value = spread.Mean,
            Conformity = conformity,
            Reason = unknown is not null ? $"uncertainty not formed: {unknown}"
                : conformity == Conformity.Undecided
                    ? "within the guard band of "
                        + $"{SiText.Format(ConformityRule.GuardBand(row.ExpandedUncertainty ?? 0, rule), row.Unit, 3)}"
                    : null,
        };
    }

    /// <summary>
    /// Whether a definition that was formed is the one wanted; one that names no route takes the bench's.
    /// </summary>
    private static bool Is(string formed, string wanted) =>
        formed == wanted || (!DefinitionId.Split(wanted).ByLoadLine && DefinitionId.Split(formed).Rule == wanted);

    private static string Why(List<string> reasons, int captures)
    {
        if (captures == 0)
        {
            return "no valid capture";
        }

        var most = reasons.GroupBy(reason => reason).OrderByDescending(group => group.Count()).First();
        return most.Count() == captures ? most.Key : $"{most.Key} (in {most.Count()} of {captures} captures)";
    }
}
