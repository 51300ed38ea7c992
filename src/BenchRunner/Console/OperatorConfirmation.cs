using System.Globalization;
using BenchRunner.Acceptance.Cautions;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Runner.Sessions;

namespace BenchRunner.Console;

/// <summary>Shows the cautions and has the operator type the bus voltage before anything is energised.</summary>
/// <remarks>
/// Read from the terminal, never from redirected input: a list of serials or a bar-code reader must not arm a bench. Keys that
/// were typed before the question are thrown away.
/// </remarks>
internal sealed class OperatorConfirmation(Screen screen, string? armedBy) : IConfirmation
{
    /// <summary>Whether there is somebody who can confirm: a terminal, or a name given on the command line.</summary>
    public static bool CanAsk => !System.Console.IsInputRedirected && !System.Console.IsOutputRedirected;

    public async Task<string?> Confirm(Plan plan, bool simulated, CancellationToken cancel)
    {
        foreach (string line in CautionLines.Of(plan, plan.Bench))
        {
            screen.Line(screen.Palette.Open("  ! ") + line);
        }

        if (simulated)
        {
            return "simulated";
        }

        if (armedBy is not null)
        {
            return armedBy;
        }

        if (!CanAsk)
        {
            return null;
        }

        double volts = plan.Points.Max(point => point.Point.BusVoltage);
        while (System.Console.KeyAvailable)
        {
            System.Console.ReadKey(intercept: true);
        }

        screen.Line(string.Create(
            CultureInfo.InvariantCulture,
            $"Type the highest bus voltage in volts ({volts:0.#}) and Enter to energise; anything else ends the run:"));
        string? typed = await Task.Run(System.Console.ReadLine, CancellationToken.None).WaitAsync(cancel);
        return double.TryParse(typed, NumberStyles.Float, CultureInfo.InvariantCulture, out double said) && said == volts
            ? Environment.UserName : null;
    }
}
