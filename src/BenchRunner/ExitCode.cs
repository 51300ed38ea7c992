namespace BenchRunner;

/// <summary>The documented exit codes. Where several apply, the highest in <see cref="Rank"/> is returned.</summary>
internal static class ExitCode
{
    /// <summary>Everything asked was done and every device accepted.</summary>
    public const int Done = 0;

    /// <summary>Done; some device rejected, or a comparison outside its stated limits.</summary>
    public const int Rejected = 1;

    /// <summary>The input is wrong: command line, a file, a plan that refuses, no way to confirm.</summary>
    public const int WrongInput = 2;

    /// <summary>Done; some device undecided or not measured.</summary>
    public const int Undecided = 3;

    /// <summary>Stopped by safety, or a latch stands.</summary>
    public const int Safety = 4;

    /// <summary>An instrument or link failed, or the bench is unfit or taken.</summary>
    public const int Instrument = 5;

    /// <summary>Evidence could not be written or does not verify.</summary>
    public const int Evidence = 6;

    /// <summary>A fault of ours, after the safe state.</summary>
    public const int Fault = 70;

    /// <summary>The operator interrupted.</summary>
    public const int Interrupted = 130;

    private static readonly int[] Rank =
        [Safety, Evidence, Instrument, Fault, Interrupted, WrongInput, Rejected, Undecided, Done];

    /// <summary>The code that stands for both.</summary>
    public static int Worse(int one, int other) =>
        Array.IndexOf(Rank, one) <= Array.IndexOf(Rank, other) ? one : other;
}
