using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Json;

/// <summary>A plan with its refusals as JSON.</summary>
internal static class PlanJson
{
    public static void Write(Sequence sequence, Planned planned) => JsonOutput.Write(new JsonObject
    {
        ["sequence"] = sequence.Name,
        ["revision"] = sequence.Revision,
        ["part"] = sequence.Part,
        ["fires"] = HalfBridge.FiresHigh(sequence) ? "high" : "low",
        ["companion"] = HalfBridge.CompanionPlace(sequence),
        ["operating_points"] = JsonOutput.Array(planned.Plan?.Points ?? [], Point),
        ["duration"] = JsonOutput.Number(planned.Plan?.Duration),
        ["bytes"] = planned.Plan?.Bytes,
        ["not_evaluated"] = JsonOutput.Array(
            planned.Plan is { } plan ? NotEvaluatedCriteria.Of(plan.Sequence, plan.Bench) : [],
            open => open.Criterion),
        ["refusals"] = JsonOutput.Array(planned.Refusals, Told),
        ["notes"] = JsonOutput.Array(planned.Notes, Told),
    });

    private static JsonObject Told(Problem problem) => new()
    {
        ["where"] = problem.Where.ToString(),
        ["message"] = problem.Message(),
    };

    private static JsonObject Point(PlannedPoint point) => new()
    {
        ["name"] = point.Point.Name,
        ["bus_voltage"] = JsonOutput.Number(point.Point.BusVoltage),
        ["load_current"] = JsonOutput.Number(point.Point.LoadCurrent),
        ["first_pulse"] = JsonOutput.Number(point.FirstPulse),
        ["gap"] = JsonOutput.Number(point.Point.Gap),
        ["second_pulse"] = JsonOutput.Number(point.Point.SecondPulse),
        ["stored_energy"] = JsonOutput.Number(point.StoredEnergy),
        ["load_energy"] = JsonOutput.Number(point.LoadEnergy),
        ["bus_droop"] = JsonOutput.Number(point.BusDroop),
        ["junction_rise"] = JsonOutput.Number(point.JunctionRise?.Warmer),
        ["junction_rise_low"] = JsonOutput.Number(point.JunctionRise?.Low),
        ["junction_rise_high"] = JsonOutput.Number(point.JunctionRise?.High),
        ["off2_current"] = JsonOutput.Number(point.Off2Current),
        ["off2_peak_voltage"] = JsonOutput.Number(point.Off2PeakVoltage),
        ["sample_interval"] = JsonOutput.Number(point.SampleInterval),
        ["samples"] = point.Samples,
        ["ranges"] = JsonOutput.Array(point.Ranges, range => new JsonObject
        {
            ["channel"] = range.Channel.Name(),
            ["span"] = JsonOutput.Number(range.Span),
            ["offset"] = JsonOutput.Number(range.Offset),
        }),
    };

    private static string Message(this Problem refusal) => refusal.ToString()[(refusal.Where.ToString().Length + 2)..];
}
