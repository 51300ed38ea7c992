using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Decisions;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Sessions;

namespace BenchRunner.Json;

/// <summary>How a session ended, as JSON.</summary>
internal static class RunJson
{
    public static void Write(RunSummary summary, string evidence, int exitCode) => JsonOutput.Write(new JsonObject
    {
        ["run"] = summary.Devices.Count > 0 ? summary.Devices[^1].Run : null,
        ["evidence"] = evidence,
        ["simulated"] = summary.Simulated,
        ["exit_code"] = exitCode,
        ["devices"] = JsonOutput.Array(summary.Devices, device => Device(device, summary.Simulated)),
        ["not_run"] = JsonOutput.Array(summary.NotRun, serial => JsonValue.Create(serial)),
    });

    private static JsonObject Device(DeviceReport device, bool simulated) => new()
    {
        ["run"] = device.Run,
        ["device"] = device.Device,
        ["outcome"] = Words.Of(device.Decision.Outcome),
        ["reason"] = device.Decision.Reason,
        ["captures_taken"] = device.CapturesTaken,
        ["captures_valid"] = device.CapturesValid,
        ["measurements"] = JsonOutput.Array(device.Decision.Values, value => Measurement(device, value, simulated)),
    };

    private static JsonObject Measurement(DeviceReport device, MeasuredValue value, bool simulated) => new()
    {
        ["run"] = device.Run,
        ["device"] = device.Device,
        ["operating_point"] = value.OperatingPoint,
        ["quantity"] = value.Quantity,
        ["definition"] = value.Definition,
        ["value"] = JsonOutput.Number(value.Value),
        ["unit"] = value.Unit,
        ["standard_uncertainty"] = JsonOutput.Number(value.StandardUncertainty),
        ["expanded_uncertainty"] = JsonOutput.Number(value.ExpandedUncertainty),
        ["coverage_factor"] = JsonOutput.Number(value.CoverageFactor),
        ["degrees_of_freedom"] = JsonOutput.Number(value.DegreesOfFreedom),
        ["captures"] = value.Captures,
        ["lower_limit"] = JsonOutput.Number(value.Lower),
        ["upper_limit"] = JsonOutput.Number(value.Upper),
        ["conformity"] = value.Conformity is { } conformity ? Words.Of(conformity) : null,
        ["reason"] = value.Reason,
        ["simulated"] = simulated,
    };
}
