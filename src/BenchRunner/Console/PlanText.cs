using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Console;

/// <summary>A plan as text for a person.</summary>
internal static class PlanText
{
    public static IEnumerable<string> Lines(Planned planned)
    {
        if (planned.Plan is { } plan)
        {
            yield return $"{plan.Sequence.Name}, revision {plan.Sequence.Revision}, on bench {plan.Bench.Name}";
            yield return Places(plan.Sequence);
            yield return Proving(plan);
            foreach (string line in plan.Points.SelectMany(Point))
            {
                yield return line;
            }

            foreach (NotEvaluated open in NotEvaluatedCriteria.Of(plan.Sequence, plan.Bench))
            {
                yield return $"not evaluated: {open.Criterion} ({open.Because})";
            }

            yield return $"one device: about {SiText.Format(plan.Duration, "s", 3)}, at most {plan.Bytes / 1e6:0.0} MB "
                + $"of evidence";
        }

        foreach (Problem note in planned.Notes)
        {
            yield return $"note: {note}";
        }

        foreach (Problem refusal in planned.Refusals)
        {
            yield return $"refused: {refusal}";
        }
    }

    private static string Places(Sequence sequence)
    {
        bool firesHigh = HalfBridge.FiresHigh(sequence);
        string companion = HalfBridge.CompanionPlace(sequence) is not { } place ? "one module fills both places"
            : $"the {place} place holds a companion with a serial of its own";
        return $"the {(firesHigh ? "high" : "low")} switch fires; {companion}";
    }

    private static string Proving(Plan plan)
    {
        OperatingPoint proving = plan.Proving.Point;
        string leakage = plan.Sequence.Leakage is { } amperes ? $"at most {SiText.Format(amperes, "A")} leak"
            : "what leaks is measured, no limit is stated";
        return $"before and after: a proving train at {SiText.Format(proving.BusVoltage, "V")}, "
            + $"{SiText.Format(proving.LoadCurrent, "A")}; at each new bus voltage, both gates off: {leakage}";
    }

    private static IEnumerable<string> Point(PlannedPoint point)
    {
        string temperature = point.Point.Temperature is { } degrees ? $"{degrees:0.#} degC" : "ambient";
        yield return $"{point.Point.Name}: {SiText.Format(point.Point.BusVoltage, "V")}, "
            + $"{SiText.Format(point.Point.LoadCurrent, "A")}, {temperature}";
        yield return $"  pulses {SiText.Format(point.FirstPulse, "s")}, gap {SiText.Format(point.Point.Gap, "s")}, "
            + $"{SiText.Format(point.Point.SecondPulse, "s")}; every {SiText.Format(point.Point.RepeatEvery, "s")}";
        yield return $"  stored {SiText.Format(point.StoredEnergy, "J", 3)} in the bank, "
            + $"{SiText.Format(point.LoadEnergy, "J", 3)} in the load; droop {point.BusDroop:0.00 %}";
        string rise = point.JunctionRise is { } kelvin
            ? $"junction rise {SiText.Format(kelvin.Low, "K", 2)} low, {SiText.Format(kelvin.High, "K", 2)} high"
            : "junction rise not stated";
        yield return $"  second turn-off at {SiText.Format(point.Off2Current, "A", 3)}, peak about "
            + $"{SiText.Format(point.Off2PeakVoltage, "V", 3)}; {rise}";
        yield return $"  {point.Samples} samples a channel at {SiText.Format(point.SampleInterval, "s")}; ranges "
            + string.Join(", ", point.Ranges.Select(range =>
                $"{range.Channel.Name()} {SiText.Format(range.Offset - (range.Span / 2), range.Channel.Unit(), 3)} to "
                + SiText.Format(range.Offset + (range.Span / 2), range.Channel.Unit(), 3)));
    }
}
