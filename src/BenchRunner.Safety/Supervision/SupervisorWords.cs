using BenchRunner.Safety.Guardians;

namespace BenchRunner.Safety.Supervision;

/// <summary>Says why the table let nothing happen.</summary>
internal static class SupervisorWords
{
    public static string Why(SupervisorStep step, IGuardian guardian) => step.Missing switch
    {
        SupervisorFacts.None => $"not allowed now (the run is {step.To})",
        var missing when missing.HasFlag(SupervisorFacts.LoopClosed) => "the interlock loop is open",
        var missing when missing.HasFlag(SupervisorFacts.GuardianAlive) && !guardian.IsAlive =>
            "the guardian is not there",
        var missing when missing.HasFlag(SupervisorFacts.NoLatch) => "a trip stands",
        var missing when missing.HasFlag(SupervisorFacts.PermitLive) => "there is no live permit",
        _ => "the envelope does not reach that far",
    };
}
