using System.Globalization;
using BenchRunner.Acceptance.Cautions;
using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Files;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Cases;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Sinks;

namespace BenchRunner.Console;

/// <summary>What the operator sees: one line an event, decisions at the end, and a live line on a terminal.</summary>
internal sealed class ProgressLog(Screen screen) : IRunSink
{
    private const string Trip = "trip";
    private const string SafeState = "safe-state";

    public void Receive(BenchEvent happened)
    {
        // Details are in the evidence, for who looks for them there.
        if (happened.Severity == Severity.Detail)
        {
            return;
        }

        if (happened.Kind == Trip)
        {
            screen.Bell();
        }

        if (happened.Kind == Trip || happened.Source == SafeState)
        {
            // What the last capture saw of bus and interlock is not true any more.
            screen.EndLive();
        }

        string at = happened.At.ToLocalTime().ToString("HH:mm:ss.fff", CultureInfo.InvariantCulture);
        string text = Screen.Printable(happened.Message);
        screen.Line($"{screen.Palette.Faint(at)}  {happened.Source,-10}  {screen.Palette.Of(happened.Severity, text)}");
    }

    // In an order that loses the least where a narrow terminal cuts it.
    public void Progress(RunProgress progress) => screen.Live(string.Create(
        CultureInfo.InvariantCulture,
        $"{progress.OperatingPoint}  capture {progress.Capture} of {progress.AtMost}  "
            + $"{progress.Valid} of {progress.Wanted} valid  {progress.BusVoltage:0.0} V  "
            + $"interlock {Interlock(progress.Interlock)}  {progress.Left:m\\:ss} left  {progress.Device}"));

    public void CaseEnded(CaseResult result)
    {
        // The cases are shown together, as the table of decisions.
    }

    public void DeviceEnded(DeviceReport report)
    {
        screen.EndLive();
        foreach (string line in DecisionTable.Lines(report.Decision, screen.Palette))
        {
            screen.Line(line);
        }

        string bus = report.BusVoltage is { } volts
            ? string.Create(
                CultureInfo.InvariantCulture, $"bus last measured {volts:0.0} V at {report.BusAt:HH:mm:ss} UTC")
            : "bus not measured";
        string energy = SiText.Format(report.BusEnergyAtMost, "J", 3);
        bus += report.BusProved ? $", {energy} in the bank" : $", NOT PROVED DOWN, up to {energy} in the bank";
        screen.Line(string.Create(
            CultureInfo.InvariantCulture,
            $"{report.Device}: {report.CapturesValid} of {report.CapturesTaken} captures valid; {bus}; run "
                + $"{report.Run}"));
        if (report.Plate is { } plate)
        {
            string shown = string.Create(CultureInfo.InvariantCulture, $"the plate is at {plate:0.0} degC");
            screen.Line(plate > CautionLines.HotFrom ? screen.Palette.Bad($"{shown}: HOT") : shown);
        }

        string reason = report.Decision.Reason is { } why ? $"  ({Screen.Printable(why)})" : "";
        screen.Line("");
        screen.Bell();
        screen.Line($"  >>>  {report.Device}  {Word(report.Decision.Outcome)}{reason}  <<<");
        screen.Line("");
    }

    private static string Interlock(InterlockState? state) => state switch
    {
        null => "not read yet",
        { EmergencyStop: true } => "EMERGENCY STOP",
        { LoopClosed: false } => "OPEN",
        _ => "closed",
    };

    private string Word(Outcome outcome) => outcome switch
    {
        Outcome.Accepted => screen.Palette.Good("ACCEPTED"),
        Outcome.Rejected => screen.Palette.Bad("REJECTED"),
        Outcome.Undecided => screen.Palette.Open("UNDECIDED"),
        Outcome.NotMeasured => screen.Palette.Open("NOT MEASURED"),
        _ => screen.Palette.Bad("STOPPED"),
    };
}
