using BenchRunner.Evidence;
using BenchRunner.Evidence.Notes;
using BenchRunner.Evidence.Queries;
using BenchRunner.Evidence.Stores;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Sessions;
using BenchRunner.Safety;

namespace BenchRunner;

/// <summary>The one place where an exception that got this far becomes an exit code and one line for the
/// user.</summary>
internal static class Ending
{
    public static async Task<int> Of(Func<Task<int>> work, CancellationToken stop)
    {
        try
        {
            return await work();
        }
        catch (Exception ended)
        {
            (string message, int code) = Explain(ended, stop);
            System.Console.Error.WriteLine(message);
            return code;
        }
    }

    /// <summary>What an exception says to the user, and its exit code.</summary>
    public static (string Message, int Code) Explain(Exception ended, CancellationToken stop) => ended switch
    {
        OperationCanceledException when stop.IsCancellationRequested => ("interrupted", ExitCode.Interrupted),
        RefusedException refused => (refused.Message, OfRefusal(refused.Kind)),
        InputException or RunRefusedException or NoteRefusedException or QueryException =>
            (ended.Message, ExitCode.WrongInput),
        EvidenceException => (ended.Message, ExitCode.Evidence),
        SafetyException => (ended.Message, ExitCode.Safety),
        BenchException or LinkException or InstrumentException => (ended.Message, ExitCode.Instrument),
        _ => ($"a fault of this program, please report it: {ended}", ExitCode.Fault),
    };

    private static int OfRefusal(RefusalKind kind) => kind switch
    {
        RefusalKind.Latched => ExitCode.Safety,
        RefusalKind.Taken => ExitCode.Instrument,
        _ => ExitCode.WrongInput,
    };
}
