using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Roles;
using BenchRunner.Safety.Watches;

namespace BenchRunner.Safety.Supervision;

/// <summary>The interlock controller's own watchdog: armed while the watch polls, taken off a bench that is down
/// only.</summary>
internal sealed class Watchdog(IInterlock interlock, BusWitness witness, EventSource events, TimeProvider time)
{
    private bool _isSet;

    public async Task Arm(CancellationToken cancel)
    {
        await interlock.SetWatchdog(SafetyLimits.Watchdog, cancel);
        _isSet = true;
    }

    /// <summary>One that was found to have acted is taken back at the end as well: the latch stands in its
    /// place.</summary>
    public void Found(bool hasActed) => _isSet = hasActed;

    /// <summary>Takes it off; a bench that may be charged is left to it.</summary>
    public async Task Disarm()
    {
        if (!_isSet || witness.MayBeEnergised)
        {
            return;
        }

        try
        {
            using var patience = new CancellationTokenSource(SafetyLimits.Watchdog, time);
            await interlock.SetWatchdog(null, patience.Token);
        }
        catch (Exception failure)
        {
            events.Say(Severity.Warning, "watchdog-left", $"the interlock's watchdog stays armed: {failure.Message}");
        }
    }
}
