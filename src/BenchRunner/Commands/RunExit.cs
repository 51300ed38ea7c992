using BenchRunner.Acceptance.Decisions;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Sessions;

namespace BenchRunner.Commands;

/// <summary>The exit code of a session.</summary>
internal static class RunExit
{
    /// <param name="summary">The session.</param>
    /// <param name="stop">Cancelled when the operator interrupted.</param>
    /// <returns>The worst of its devices and of what broke it off.</returns>
    public static int Of(RunSummary summary, CancellationToken stop) => summary.Devices.Aggregate(
        summary.BrokenOff is { } broken ? Ending.Explain(broken, stop).Code : ExitCode.Done,
        (code, device) => ExitCode.Worse(code, ExitCode.Worse(OfEnding(device.Ending), OfOutcome(device))));

    public static string Words(int code) => code switch
    {
        ExitCode.Done => "done, every device accepted",
        ExitCode.Rejected => "done, some device rejected",
        ExitCode.Undecided => "done, some device undecided or not measured",
        ExitCode.Safety => "STOPPED BY SAFETY",
        ExitCode.Instrument => "an instrument or link failed",
        ExitCode.Evidence => "the evidence could not be written",
        ExitCode.WrongInput => "ended before every device was run",
        ExitCode.Interrupted => "interrupted by the operator",
        _ => "a fault of this program",
    };

    private static int OfEnding(BenchEnding ending) => ending switch
    {
        BenchEnding.Proved => ExitCode.Done,
        BenchEnding.Tripped => ExitCode.Safety,
        BenchEnding.InstrumentFailed => ExitCode.Instrument,
        BenchEnding.EvidenceFailed => ExitCode.Evidence,
        BenchEnding.Interrupted => ExitCode.Interrupted,
        _ => ExitCode.Fault,
    };

    private static int OfOutcome(DeviceReport device) => device.Decision.Outcome switch
    {
        Outcome.Accepted or Outcome.Stopped => ExitCode.Done,
        Outcome.Rejected => ExitCode.Rejected,
        _ => ExitCode.Undecided,
    };
}
