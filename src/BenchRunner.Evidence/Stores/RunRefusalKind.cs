namespace BenchRunner.Evidence.Stores;

/// <summary>Why a run may not begin.</summary>
public enum RunRefusalKind
{
    /// <summary>The device was decided in its lot, and no reason to measure it again was given.</summary>
    AlreadyDecided,

    /// <summary>The device had as many attempts in its lot as the sequence allows.</summary>
    TooManyAttempts,

    /// <summary>The device has a run in its lot that has not ended.</summary>
    InFlight,

    /// <summary>A reason to measure again is given without a lot.</summary>
    AgainWithoutLot,

    /// <summary>The file holds simulated runs and this one is measured, or the other way round.</summary>
    MixedOrigin,
}
