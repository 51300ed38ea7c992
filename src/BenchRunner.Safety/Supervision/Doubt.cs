using BenchRunner.Acceptance.Benches;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;

namespace BenchRunner.Safety.Supervision;

/// <summary>What is wrong with what a poll of interlock and voltmeter has found.</summary>
/// <param name="envelope">What the bench may do at most.</param>
internal sealed class Doubt(Envelope envelope)
{
    /// <param name="interlock">What the interlock controller said.</param>
    /// <param name="volts">The voltmeter's reading, V, without its sign.</param>
    /// <param name="leave">What the permit allows; null: there is none.</param>
    /// <param name="discharging">Whether the bank is being emptied.</param>
    /// <param name="mustBeClosed">Whether the loop must be closed though nothing is charged.</param>
    /// <returns>The reason to trip; null where there is none.</returns>
    public string? Of(
        InterlockState interlock, double volts, PermitBounds? leave, bool discharging, bool mustBeClosed)
    {
        if (interlock.EmergencyStop)
        {
            return "the emergency stop is pressed";
        }

        if (interlock.WatchdogTripped)
        {
            return "the interlock controller's watchdog has acted";
        }

        bool energised = leave is not null || discharging || volts >= SafetyLimits.BusDown;
        if (!interlock.LoopClosed && (mustBeClosed || energised))
        {
            return "the interlock loop is open";
        }

        if (leave is null)
        {
            return !discharging && volts >= SafetyLimits.BusDown
                ? $"the bus is at {volts:0.0} V and nothing was allowed to charge it" : null;
        }

        double allowed = Math.Min(leave.Voltage.Value * (1 + SafetyLimits.OverVoltageMargin), envelope.Voltage);
        double ceiling = Math.Max(allowed, SafetyLimits.BusDown);
        return volts > ceiling
            ? $"the bus is at {volts:0.0} V, above the {ceiling:0.0} V that the permit allows" : null;
    }
}
