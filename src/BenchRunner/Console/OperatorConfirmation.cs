using System.Globalization;
using BenchRunner.Acceptance.Cautions;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Runner.Sessions;

namespace BenchRunner.Console;

/// <summary>Shows the cautions and has the operator type the bus voltage before anything is energised.</summary>
internal sealed class OperatorConfirmation(Screen screen, string? armedBy) : IConfirmation
{
    /// <summary>Whether there is a person who can be asked.</summary>
    public static bool CanAsk
    {
        get
        {
            using Terminal? terminal = Terminal.Open();
            return terminal is not null;
        }
    }

    public async Task<string?> Confirm(Plan plan, bool simulated, CancellationToken cancel)
    {
        foreach (string line in CautionLines.Of(plan, plan.Bench))
        {
            screen.Line(screen.Palette.Open("  ! ") + line);
        }

        return armedBy ?? (simulated ? "simulated" : await Ask(plan, cancel));
    }

    private async Task<string?> Ask(Plan plan, CancellationToken cancel)
    {
        using Terminal? terminal = Terminal.Open();
        if (terminal is null)
        {
            return null;
        }

        double volts = plan.Points.Max(point => point.Point.BusVoltage);
        await screen.Written(cancel);
        terminal.DiscardWaiting();
        terminal.Ask(string.Create(
            CultureInfo.InvariantCulture,
            $"Type the highest bus voltage in volts ({volts:0.#}) and Enter to energise; anything else ends the run:"));
        string? typed = await terminal.ReadLine(cancel);
        return double.TryParse(
            typed, NumberStyles.Float, CultureInfo.InvariantCulture, out double said) && said == volts
            ? Environment.UserName : null;
    }
}
