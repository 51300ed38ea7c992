using BenchRunner.Acceptance.Events;
using BenchRunner.Safety.Watches;

namespace BenchRunner.Safety.SafeStates;

/// <summary>Brings the bench to the safe state: supply off, pulses inhibited, bleeder on, bus proved down by the
/// voltmeter.</summary>
/// <remarks>
/// It takes no caller's token: whoever asked to stop wants exactly this to be finished. Each instrument is told on its
/// own, so that one which does not answer holds up no other; supply off is sent before bleeder on and not waited for.
/// </remarks>
public sealed class SafeState(SafeableRoles roles, BusWitness witness, EventSource events, TimeProvider time)
{
    private static readonly TimeSpan AnswersWithin = TimeSpan.FromSeconds(3);
    private static readonly TimeSpan LookEvery = TimeSpan.FromMilliseconds(100);
    private readonly UnprovedWords _unproved = new(witness, events, time);

    /// <summary>Told each time the proof looks at the bus, also where an instrument is silent.</summary>
    public Action? Round { get; init; }

    /// <summary>What must wait for the proof: the off bias of the gates, taken away then and not before.</summary>
    public Func<CancellationToken, Task>? AfterProof { get; init; }

    /// <summary>Reaches the safe state, or says why it is not proved.</summary>
    public async Task<SafeStateReport> Reach()
    {
        if (!_unproved.Stands)
        {
            events.Say(Severity.Information, "safe-state", "bringing the bench to the safe state");
        }

        Task<string?>[] told =
        [
            Try("supply", roles.Supply.MakeSafe),
            Try("pulser", roles.Pulser.MakeSafe),
            Try("interlock", roles.Bleeder.MakeSafe),
            roles.Hotplate is { } plate ? Try("hotplate", plate.MakeSafe) : Task.FromResult<string?>(null),
        ];
        SafeStateReport proof = await new BusProof(roles.Voltmeter, witness, events, time, Round).Take();
        var doubts = new List<string>(proof.Doubts);
        foreach (Task<string?> one in told)
        {
            Add(doubts, await one);
        }

        if (proof.Proved && AfterProof is { } afterProof)
        {
            Add(doubts, await Try("pulser", afterProof));
        }

        SafeStateReport report = proof with { Doubts = doubts };
        if (report.Proved)
        {
            SayDown(report);
        }
        else
        {
            _unproved.Say(report, known: doubts.Skip(proof.Doubts.Count));
        }

        return report;
    }

    /// <summary>Watches a bus that was proved down; alarms where it rises again.</summary>
    /// <param name="span">How long.</param>
    /// <returns>False: it rose, and counts as energised.</returns>
    public async Task<bool> StaysDown(TimeSpan span)
    {
        long began = time.GetTimestamp();
        while (time.GetElapsedTime(began) < span)
        {
            await Task.Delay(LookEvery, time);
            if (await Look() is { } volts && volts >= witness.DownBelow)
            {
                events.Say(
                    Severity.Alarm, "bus-risen",
                    $"ALARM: the bus rose to {witness.Discharge.Words(volts)} after it was proved down. WAIT; DO NOT "
                        + "OPEN the enclosure.");
                return false;
            }
        }

        return true;
    }

    private static void Add(List<string> doubts, string? doubt)
    {
        if (doubt is not null)
        {
            doubts.Add(doubt);
        }
    }

    private void SayDown(SafeStateReport report)
    {
        foreach (string doubt in report.Doubts)
        {
            events.Say(Severity.Error, "safe-state-doubt", doubt);
        }

        _unproved.End();
        witness.ProvedDown();
        events.Say(
            Severity.Information,
            "bus-down",
            $"bus measured at {witness.Discharge.Words(report.Voltage!.Value)} at {report.At:HH:mm:ss} UTC, below "
                + witness.DownWords);
    }

    private async Task<double?> Look()
    {
        try
        {
            using var patience = new CancellationTokenSource(AnswersWithin, time);
            long asked = time.GetTimestamp();
            double volts = Math.Abs((await roles.Voltmeter.Read(patience.Token)).Value);
            _ = witness.Saw(volts, asked);
            return volts;
        }
        catch (Exception)
        {
            // It was proved down; that nothing more is seen of it is no rise.
            return null;
        }
    }

    private async Task<string?> Try(string role, Func<CancellationToken, Task> makeSafe)
    {
        try
        {
            using var patience = new CancellationTokenSource(AnswersWithin, time);
            await makeSafe(patience.Token);
            return null;
        }
        catch (Exception failure)
        {
            string why = failure is OperationCanceledException
                ? $"no answer within {AnswersWithin.TotalSeconds:0} s" : failure.Message;
            return $"{role} did not confirm its safe side: {why}";
        }
    }
}
