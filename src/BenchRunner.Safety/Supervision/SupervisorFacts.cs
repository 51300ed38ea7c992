namespace BenchRunner.Safety.Supervision;

/// <summary>What must be so before something that leads to an energised bus is let happen.</summary>
[Flags]
public enum SupervisorFacts
{
    /// <summary>Nothing.</summary>
    None = 0,

    /// <summary>The interlock loop was closed at the last poll.</summary>
    LoopClosed = 1,

    /// <summary>The guardian lives.</summary>
    GuardianAlive = 2,

    /// <summary>The bounds asked for, or of the permit, lie inside the bench's envelope.</summary>
    EnvelopeKnown = 4,

    /// <summary>The permit is live.</summary>
    PermitLive = 8,

    /// <summary>No trip and no latch stands.</summary>
    NoLatch = 16,

    /// <summary>All that a permit rests on.</summary>
    Grant = LoopClosed | GuardianAlive | EnvelopeKnown | NoLatch,

    /// <summary>All that an energised bus rests on.</summary>
    Energise = Grant | PermitLive,
}
