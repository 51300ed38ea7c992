using BenchRunner.Acceptance.Benches;
using BenchRunner.Instruments.Permits;
using BenchRunner.Safety.Watches;

namespace BenchRunner.Safety.Supervision;

/// <summary>What a complete poll of interlock and voltmeter means.</summary>
/// <param name="envelope">What the bench may do at most.</param>
/// <param name="witness">Knows when the bank counts as down.</param>
internal sealed class PollJudge(Envelope envelope, BusWitness witness)
{
    private const string LoopIsOpen = "the interlock loop is open";

    /// <param name="poll">What was read.</param>
    /// <param name="leave">What the permit allows; null: there is none.</param>
    /// <param name="state">Where the run stands.</param>
    /// <param name="mustBeClosed">Whether the loop must be closed though nothing is charged.</param>
    public Finding Of(PollReading poll, PermitBounds? leave, SupervisorState state, bool mustBeClosed)
    {
        bool isUp = poll.Volts >= witness.DownBelow;
        bool isFalling = poll.WhileDischarging || state is SupervisorState.Discharging or SupervisorState.Tripping;
        if (SupervisorTable.IsTrip(state))
        {
            return isUp && !isFalling ? Risen(poll, state) : new Finding(SupervisorEvent.Sound, null);
        }

        if (poll.Interlock.EmergencyStop)
        {
            return new Finding(SupervisorEvent.Doubt, "the emergency stop is pressed");
        }

        if (poll.Interlock.WatchdogTripped)
        {
            return new Finding(SupervisorEvent.Doubt, "the interlock controller's watchdog has acted");
        }

        if (!poll.Interlock.LoopClosed)
        {
            return new Finding(
                mustBeClosed || (isUp && leave is null) ? SupervisorEvent.Doubt : SupervisorEvent.LoopOpen, LoopIsOpen);
        }

        if (leave is null)
        {
            return isUp && !isFalling ? Risen(poll, state)
                : poll.StateBefore == SupervisorState.Down && state == SupervisorState.Down
                    && !poll.Interlock.BleederEngaged
                    ? new Finding(SupervisorEvent.Doubt, "the bleeder came off the bank after the bus was proved down")
                : new Finding(SupervisorEvent.Sound, null);
        }

        return new Finding(
            OfVoltage(poll, leave) is { } wrong ? (SupervisorEvent.Doubt, wrong) : (SupervisorEvent.Sound, null));
    }

    private Finding Risen(PollReading poll, SupervisorState state) => new(
        SupervisorEvent.Risen,
        state is SupervisorState.Down or SupervisorState.TrippedDown
            ? $"the bus rose to {witness.Discharge.Words(poll.Volts)} after it was proved down"
            : $"the bus is at {witness.Discharge.Words(poll.Volts)} and nothing was allowed to charge it");

    private string? OfVoltage(PollReading poll, PermitBounds leave)
    {
        if (poll.Fell is { } fell)
        {
            return $"{fell}, while nothing was told to discharge it";
        }

        double allowed = Math.Min(leave.Voltage.Value * (1 + SafetyLimits.OverVoltageMargin), envelope.Voltage);
        double ceiling = Math.Max(allowed, witness.DownBelow);
        return poll.Volts > ceiling
            ? $"the bus is at {witness.Discharge.Words(poll.Volts)}, above the {ceiling:0.0} V that the permit allows"
            : null;
    }
}
