using BenchRunner.Signals.Traces;
using BenchRunner.Signals.Units;

namespace BenchRunner.Instruments.Roles;

/// <summary>Time base, trigger and channels of the scope for one operating point.</summary>
/// <param name="Interval">Sample interval.</param>
/// <param name="Points">Samples a channel.</param>
/// <param name="Pretrigger">Time from the first sample to the trigger.</param>
/// <param name="TriggerOn">The channel whose rising crossing triggers.</param>
/// <param name="TriggerLevel">Its level, V.</param>
/// <param name="Channels">The channels recorded.</param>
public sealed record ScopeSettings(
    Seconds Interval,
    int Points,
    Seconds Pretrigger,
    Channel TriggerOn,
    double TriggerLevel,
    IReadOnlyList<ScopeChannelSettings> Channels);
