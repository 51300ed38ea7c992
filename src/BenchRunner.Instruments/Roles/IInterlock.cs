using BenchRunner.Instruments.Permits;

namespace BenchRunner.Instruments.Roles;

/// <summary>The interlock controller: read, never bypassed. Its bleeder relay and watchdog are worked through
/// it.</summary>
public interface IInterlock : ISafeable
{
    /// <summary>What the instrument said it is.</summary>
    InstrumentIdentity Identity { get; }

    /// <summary>Reads loop, emergency stop, bleeder and watchdog; a poll feeds the watchdog.</summary>
    Task<InterlockState> Read(CancellationToken cancel);

    /// <summary>Puts the bleeder across the bank and reads the relay back.</summary>
    Task EngageBleeder(CancellationToken cancel);

    /// <summary>Takes the bleeder off the bank, which lets it be charged.</summary>
    /// <exception cref="PermitException">The permit is dead; nothing was switched.</exception>
    Task ReleaseBleeder(Permit permit, CancellationToken cancel);

    /// <summary>Arms the controller's watchdog (null: switches it off) and reads it back.</summary>
    Task SetWatchdog(TimeSpan? time, CancellationToken cancel);
}
