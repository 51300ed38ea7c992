namespace BenchRunner.Safety.Supervision;

/// <summary>What may happen to a run as safety sees it.</summary>
public enum SupervisorEvent
{
    /// <summary>The first complete poll has found nothing.</summary>
    WatchBegins,

    /// <summary>The runner asks for a permit, after a poll that found nothing.</summary>
    PermitAsked,

    /// <summary>The pulser was read back: both gates are held at their off level.</summary>
    BiasVerified,

    /// <summary>The runner is about to switch the supply on.</summary>
    Energising,

    /// <summary>A complete poll has found nothing.</summary>
    Sound,

    /// <summary>A poll has found the interlock loop open.</summary>
    LoopOpen,

    /// <summary>The bus is up and nothing was allowed to charge it.</summary>
    Risen,

    /// <summary>Anything else that is wrong: emergency stop, watchdog, voltage, silence, a gap between polls, what the
    /// runner found.</summary>
    Doubt,

    /// <summary>The guardian is lost.</summary>
    GuardianLost,

    /// <summary>The runner makes no progress.</summary>
    Overdue,

    /// <summary>The reply to a command that energises or fires was lost: what it did is unknown.</summary>
    ReplyLost,

    /// <summary>The safe state is asked for.</summary>
    StopAsked,

    /// <summary>The voltmeter has proved the bus down.</summary>
    ProvedDown,

    /// <summary>The bus was not proved down in its time, or the voltmeter is not believed.</summary>
    NotProved,

    /// <summary>The run wants to end.</summary>
    Ends,
}
