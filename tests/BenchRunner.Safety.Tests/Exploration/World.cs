using BenchRunner.Safety.Supervision;

namespace BenchRunner.Safety.Tests.Exploration;

/// <summary>A run and all that is around it, as far as safety can tell the difference.</summary>
/// <param name="State">Where the supervisor stands.</param>
/// <param name="Permit">The permit that the runner holds.</param>
/// <param name="Loop">Whether the interlock loop is closed.</param>
/// <param name="LoopSeen">Whether it was at the last poll.</param>
/// <param name="Guardian">The guardian.</param>
/// <param name="Runner">The runner's process, supervisor and all.</param>
/// <param name="SupplyOn">Whether the supply charges.</param>
/// <param name="BankUp">Whether the bank is charged.</param>
/// <param name="Latch">Whether a latch stands beside the bench file.</param>
/// <param name="Envelope">Whether what the runner asks for lies inside the envelope.</param>
internal sealed record World(
    SupervisorState State,
    PermitLife Permit,
    bool Loop,
    bool LoopSeen,
    GuardianLife Guardian,
    RunnerLife Runner,
    bool SupplyOn,
    bool BankUp,
    bool Latch,
    bool Envelope)
{
    /// <summary>Before anything: a closed enclosure, a living guardian, an empty bank.</summary>
    public static World Start(bool envelope) => new(
        SupervisorState.Unwatched, PermitLife.None, true, true, GuardianLife.Alive, RunnerLife.Running, false, false,
        false, envelope);
}

/// <summary>A permit's life; it dies by its deadline as well.</summary>
internal enum PermitLife
{
    None,
    Live,
    Dead,
}

/// <summary>The guardian's life and what it has done.</summary>
internal enum GuardianLife
{
    Alive,
    Dead,

    /// <summary>In the middle of what it does.</summary>
    Acting,
    Acted,
}

/// <summary>The runner's life.</summary>
internal enum RunnerLife
{
    Running,

    /// <summary>Stopped by a signal; it may resume.</summary>
    Stopped,
    Ended,
}
