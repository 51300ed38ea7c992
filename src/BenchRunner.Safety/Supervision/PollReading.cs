using BenchRunner.Instruments.Roles;

namespace BenchRunner.Safety.Supervision;

/// <summary>What one complete poll has read.</summary>
/// <param name="Interlock">What the interlock controller said.</param>
/// <param name="Volts">The voltmeter's reading, V, without its sign.</param>
/// <param name="Fell">Why this reading cannot be true; null where it can.</param>
/// <param name="StateBefore">Where the run stood when the poll began: a voltage that was read while the bank discharged
/// is judged so, though the proof came in between.</param>
internal sealed record PollReading(InterlockState Interlock, double Volts, string? Fell, SupervisorState StateBefore)
{
    public bool WhileDischarging => StateBefore is SupervisorState.Discharging or SupervisorState.Tripping;
}
