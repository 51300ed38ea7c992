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
        catch (OperationCanceledException) when (stop.IsCancellationRequested)
        {
            return Say("interrupted", ExitCode.Interrupted);
        }
        catch (InputException wrong)
        {
            return Say(wrong.Message, ExitCode.WrongInput);
        }
        catch (Runner.Sessions.RefusedException refused)
        {
            return Say(refused.Message, refused.Kind switch
            {
                Runner.Sessions.RefusalKind.Latched => ExitCode.Safety,
                Runner.Sessions.RefusalKind.Taken => ExitCode.Instrument,
                _ => ExitCode.WrongInput,
            });
        }
        catch (Evidence.Stores.RunRefusedException refused)
        {
            return Say(refused.Message, ExitCode.WrongInput);
        }
        catch (Evidence.Queries.QueryException wrong)
        {
            return Say(wrong.Message, ExitCode.WrongInput);
        }
        catch (Evidence.EvidenceException lost)
        {
            return Say(lost.Message, ExitCode.Evidence);
        }
        catch (Safety.SafetyException stopped)
        {
            return Say(stopped.Message, ExitCode.Safety);
        }
        catch (Exception failed) when (failed is Runner.Benches.BenchException
            or Instruments.Links.LinkException or Instruments.Roles.InstrumentException)
        {
            return Say(failed.Message, ExitCode.Instrument);
        }
        catch (Exception fault)
        {
            return Say($"a fault of this program, please report it: {fault}", ExitCode.Fault);
        }
    }

    private static int Say(string message, int code)
    {
        System.Console.Error.WriteLine(message);
        return code;
    }
}
