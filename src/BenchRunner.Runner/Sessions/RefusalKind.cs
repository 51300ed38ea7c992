namespace BenchRunner.Runner.Sessions;

/// <summary>Why a session is refused before anything is energised.</summary>
public enum RefusalKind
{
    /// <summary>What was asked for is wrong or cannot be confirmed.</summary>
    Input,

    /// <summary>A latch stands on the bench.</summary>
    Latched,

    /// <summary>Another run holds the bench.</summary>
    Taken,
}
