using System.Globalization;
using BenchRunner.Acceptance.Cautions;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Json;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Sessions;

namespace BenchRunner.Console;

/// <summary>Shows the cautions, has the operator type the bus voltage before anything is energised, and asks where a
/// device that was not accepted was put.</summary>
/// <param name="screen">Where the cautions go.</param>
/// <param name="terminal">Where questions are put.</param>
/// <param name="sequence">Says what a serial looks like: what may be one never answers.</param>
/// <param name="armedBy">Who confirmed at the bench before the start; null: nobody.</param>
internal sealed class BenchOperator(Screen screen, OperatorTerminal terminal, Sequence sequence, string? armedBy)
    : IOperator
{
    private const int LongestPlace = 200;

    public bool CanAsk => OperatorTerminal.Exists;

    public async Task<Confirmation?> Confirm(Plan plan, Closing closing, CancellationToken cancel)
    {
        foreach (string line in CautionLines.Of(plan, plan.Bench))
        {
            screen.Line(screen.Palette.Open("  ! ") + line);
        }

        // A name given beforehand is for the closing that it was given for.
        string? given = closing.Simulated ? armedBy ?? "simulated" : closing.SeenOpen ? null : armedBy;
        if (given is not null)
        {
            return new Confirmation(given, Asked: false);
        }

        if (closing.Clamps.Count > 0)
        {
            screen.Line(screen.Palette.Open(
                $"  ! {string.Join(", ", closing.Clamps)}: press the clamp's degauss button before you answer"));
        }

        return await AskVoltage(plan.Points.Max(point => point.Point.BusVoltage), closing.Device, cancel)
            ? new Confirmation(Environment.UserName, Asked: true) : null;
    }

    public async Task<string?> WherePut(DeviceReport report, CancellationToken cancel)
    {
        string question =
            $"{report.Device} is {Words.Of(report.Decision.Outcome)}: type where it was put (bin, shelf) and Enter:";
        while (await terminal.Ask(question, cancel) is { } typed)
        {
            string place = Screen.Printable(typed);
            if (place.Length == 0 || place.Length > LongestPlace)
            {
                Complain($"1 to {LongestPlace} characters say where it was put");
            }
            else if (MayBeSerial(place))
            {
                Complain($"'{place}' has the form of a serial and is no answer; describe the place, e.g. 'red bin 3'");
            }
            else
            {
                return place;
            }
        }

        return null;
    }

    private async Task<bool> AskVoltage(double volts, string device, CancellationToken cancel)
    {
        // Where a bare number may be a serial, a bar code could be the answer: it is asked for with its unit.
        string number = volts.ToString("0.###", CultureInfo.InvariantCulture);
        string wanted = MayBeSerial(number) ? number + " V" : number;
        string question = $"{device}: Type the highest bus voltage in volts ({wanted}) and Enter to energise; anything "
            + "else ends the run:";
        while (await terminal.Ask(question, cancel) is { Length: > 0 } typed)
        {
            string said = typed.EndsWith(" V", StringComparison.Ordinal) ? typed[..^2] : typed;
            if (!MayBeSerial(typed))
            {
                return double.TryParse(said, NumberStyles.Float, CultureInfo.InvariantCulture, out double v)
                    && v == volts;
            }

            Complain($"'{Screen.Printable(typed)}' has the form of a serial and is no answer; nothing is energised");
        }

        return false;
    }

    private bool MayBeSerial(string text) => SerialForm.Check(text, sequence, "") is null;

    private void Complain(string what) => screen.Line(screen.Palette.Bad($"  {what}"));
}
