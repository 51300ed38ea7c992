using BenchRunner.Acceptance.Events;
using BenchRunner.Safety.Watches;

namespace BenchRunner.Safety.SafeStates;

/// <summary>Brings the bench to the safe state: pulses inhibited, supply off, bleeder on, bus proved down by the
/// voltmeter.</summary>
/// <remarks>
/// It takes no caller's token: whoever asked to stop wants exactly this to be finished. Each instrument is told on its
/// own, so that one which does not answer holds up no other; supply off is sent before bleeder on and not waited for.
/// </remarks>
public sealed class SafeState(
    SafeableRoles roles, BusWitness witness, Discharge discharge, EventSource events, TimeProvider time)
{
    private static readonly TimeSpan ReadEvery = TimeSpan.FromMilliseconds(20);

    /// <summary>Reaches the safe state, or says why it is not proved.</summary>
    public async Task<SafeStateReport> Reach()
    {
        events.Say(Severity.Information, "safe-state", "bringing the bench to the safe state");
        var doubts = new List<string>();
        Task<string?> pulser = Try("pulser", roles.Pulser.MakeSafe);
        Task<string?> supply = Try("supply", roles.Supply.MakeSafe);
        Task<string?> bleeder = Try("interlock", roles.Bleeder.MakeSafe);
        Task<string?> heater = roles.Hotplate is { } plate
            ? Try("hotplate", plate.MakeSafe) : Task.FromResult<string?>(null);
        SafeStateReport proof = await Prove(doubts);
        foreach (Task<string?> told in (Task<string?>[])[pulser, supply, bleeder, heater])
        {
            if (await told is { } doubt)
            {
                doubts.Add(doubt);
            }
        }

        return Report(proof with { Doubts = doubts });
    }

    private SafeStateReport Report(SafeStateReport report)
    {
        foreach (string doubt in report.Doubts)
        {
            events.Say(Severity.Error, "safe-state-doubt", doubt);
        }

        if (report.Proved)
        {
            witness.ProvedDown();
            events.Say(
                Severity.Information,
                "bus-down",
                $"bus measured at {report.Voltage:0.0} V at {report.At:HH:mm:ss} UTC, below "
                    + $"{SafetyLimits.BusDown:0} V DC");
        }
        else
        {
            string last = report.Voltage is { } volts ? $"last reading {volts:0.0} V" : "no reading";
            events.Say(
                Severity.Alarm,
                "bus-not-proved-down",
                $"THE BUS IS NOT PROVED DOWN ({last}). Treat it as charged. Keep the enclosure closed; "
                    + "isolate and discharge by your lab's own procedure.");
        }

        return report;
    }

    private async Task<SafeStateReport> Prove(List<string> doubts)
    {
        long start = time.GetTimestamp();
        double? first = null;
        double? last = null;
        DateTimeOffset? at = null;
        TimeSpan firstAt = default;
        TimeSpan limit = TimeSpan.FromSeconds(3);
        string? silent = null;
        while (true)
        {
            try
            {
                using var patience = new CancellationTokenSource(TimeSpan.FromSeconds(1), time);
                double volts = Math.Abs((await roles.Voltmeter.Read(patience.Token)).Value);
                TimeSpan now = time.GetElapsedTime(start);
                witness.Saw(volts);
                (last, at, silent) = (volts, time.GetUtcNow(), null);
                if (first is null)
                {
                    (first, firstAt) = (volts, now);
                    limit = now + TimeSpan.FromSeconds((2 * discharge.TimeTo(volts, SafetyLimits.BusDown)) + 1);
                }

                if (volts < SafetyLimits.BusDown)
                {
                    string? why = Disbelief(first.Value, volts, (now - firstAt).TotalSeconds);
                    if (why is not null)
                    {
                        doubts.Add(why);
                    }

                    return new SafeStateReport(why is null, volts, at, doubts);
                }
            }
            catch (Exception failure)
            {
                silent = failure is OperationCanceledException ? "no answer within 1 s" : failure.Message;
            }

            if (time.GetElapsedTime(start) > limit)
            {
                doubts.Add(silent is null
                    ? $"bus at {last:0.0} V after {limit.TotalSeconds:0.0} s, expected below {SafetyLimits.BusDown:0} V"
                    : $"voltmeter: {silent}");
                return new SafeStateReport(false, last, at, doubts);
            }

            await Task.Delay(ReadEvery, time);
        }
    }

    /// <summary>Why a reading below the limit is no proof; null where it is one.</summary>
    private string? Disbelief(double first, double last, double seconds)
    {
        if (!witness.Followed)
        {
            return "the voltmeter never followed the bus up, so its low reading proves nothing: look for an open lead";
        }

        // Half the planned time constant: a bank cannot empty faster through its bleeder than the bleeder lets it.
        double fastest = 0.5 * discharge.TimeTo(first, Math.Max(last, 1));
        return first >= SafetyLimits.BusDown && seconds < fastest
            ? $"the voltmeter fell from {first:0} V to {last:0.0} V in {seconds:0.000} s, faster than the bleeder can: "
                + "a fuse or lead may have opened and the bank be full"
            : null;
    }

    private async Task<string?> Try(string role, Func<CancellationToken, Task> makeSafe)
    {
        try
        {
            using var patience = new CancellationTokenSource(TimeSpan.FromSeconds(3), time);
            await makeSafe(patience.Token);
            return null;
        }
        catch (Exception failure)
        {
            string why = failure is OperationCanceledException ? "no answer within 3 s" : failure.Message;
            return $"{role} did not confirm its safe side: {why}";
        }
    }
}
