namespace BenchRunner.Safety.Supervision;

/// <summary>What safety does at a transition.</summary>
[Flags]
public enum SupervisorActs
{
    /// <summary>Nothing.</summary>
    None = 0,

    /// <summary>Lets nothing happen, and says why.</summary>
    Refuse = 1,

    /// <summary>Issues a permit in place of any before.</summary>
    Issue = 2,

    /// <summary>Renews the permit.</summary>
    Renew = 4,

    /// <summary>Revokes the permit for good.</summary>
    Revoke = 8,

    /// <summary>Marks the trip: the first reason stands, the latch is left, whoever waits is woken.</summary>
    Latch = 16,

    /// <summary>Begins the safe state; where it is under way, joins it.</summary>
    MakeSafe = 32,

    /// <summary>Alarms.</summary>
    Alarm = 64,

    /// <summary>Lets the watch send its heartbeat.</summary>
    Beat = 128,
}
