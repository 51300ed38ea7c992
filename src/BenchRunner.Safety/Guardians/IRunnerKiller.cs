namespace BenchRunner.Safety.Guardians;

/// <summary>Ends the runner, so that one that was stopped can never resume and fire.</summary>
public interface IRunnerKiller
{
    /// <summary>Ends it and sees it gone. Only the process that was there when the guardian began is ever meant.</summary>
    /// <returns>Null: it is gone. Otherwise why that is not certain. Never throws.</returns>
    Task<string?> End();
}
