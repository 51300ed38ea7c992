using System.Globalization;
using System.Text.Json.Nodes;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Evidence.Queries;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Sessions;

namespace BenchRunner.Json;

/// <summary>How a session ended, as JSON.</summary>
internal static class RunJson
{
    public static void Write(RunSummary summary, Bench bench, string evidence, int exitCode) => JsonOutput.Write(new JsonObject
    {
        ["run"] = summary.Devices.Count > 0 ? summary.Devices[^1].Run : null,
        ["evidence"] = evidence,
        ["simulated"] = summary.Simulated,
        ["exit_code"] = exitCode,
        ["safety"] = Safety(bench),
        ["devices"] = JsonOutput.Array(summary.Devices, device => Device(device, evidence)),
        ["not_run"] = JsonOutput.Array(summary.NotRun, serial => JsonValue.Create(serial)),
    });

    private static JsonObject Device(DeviceReport device, string evidence) => new()
    {
        ["run"] = device.Run,
        ["device"] = device.Device,
        ["outcome"] = Words.Of(device.Decision.Outcome),
        ["reason"] = device.Decision.Reason,
        ["captures_taken"] = device.CapturesTaken,
        ["captures_valid"] = device.CapturesValid,
        ["bus"] = Bus(device),
        ["measurements"] = Measurements(evidence, device.Run),
    };

    private static JsonObject Safety(Bench bench) => new()
    {
        ["bus_down"] = JsonOutput.Number(bench.Safety.BusDown),
        ["energy_down"] = JsonOutput.Number(bench.Safety.EnergyDown),
        ["capacitance"] = JsonOutput.Number(bench.BusCapacitance),
        ["down_below"] = JsonOutput.Number(bench.Safety.DownBelow(bench.BusCapacitance)),
        ["discharge_within"] = JsonOutput.Number(bench.Safety.DischargeWithin),
        ["reply_within"] = JsonOutput.Number(bench.Safety.ReplyWithin),
        ["guardian_silence"] = JsonOutput.Number(bench.Safety.GuardianSilence),
    };

    private static JsonObject Bus(DeviceReport device) => new()
    {
        ["proved_down"] = device.BusProved,
        ["voltage"] = JsonOutput.Number(device.BusVoltage),
        ["at"] = device.BusAt?.ToString("yyyy-MM-ddTHH:mm:ss.fffZ", CultureInfo.InvariantCulture),
        ["energy_at_most"] = JsonOutput.Number(device.BusEnergyAtMost),
    };

    /// <summary>The rows of the view, as the evidence has them: names and columns are the same contract.</summary>
    private static JsonArray Measurements(string evidence, string run)
    {
        QueryTable table = QueryRunner.Run(evidence, "run-values", new Dictionary<string, string> { ["run"] = run });
        return JsonOutput.Array(table.Rows, row =>
        {
            var one = new JsonObject();
            for (int i = 0; i < table.Columns.Count; i++)
            {
                one[table.Columns[i]] = JsonOutput.Cell(row[i]);
            }

            return one;
        });
    }
}
