using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Watches;

namespace BenchRunner.Safety.Guardians;

/// <summary>The guardian: listens to the runner's heartbeats; where they stay away it ends the runner first, then makes the
/// bench safe, proves it and says so.</summary>
/// <remarks>
/// It can energise nothing: what it holds can be made safe or read. Knows no process and no wall clock, so that it runs
/// in a simulation as it does beside a bench.
/// </remarks>
/// <param name="own">Instruments on links of its own, open already: switched off beside a runner that is on its way.</param>
/// <param name="safeState">Reaches and proves the safe state, over the same links and those it opens for it.</param>
/// <param name="witness">What runner and voltmeter have shown of the bus; the safe state believes by it.</param>
/// <param name="beats">The runner's voice.</param>
/// <param name="killer">Ends the runner.</param>
/// <param name="options">Bounds.</param>
/// <param name="events">Takes what it does.</param>
/// <param name="time">The clock.</param>
public sealed class GuardianCore(
    IReadOnlyList<ISafeable> own,
    SafeState safeState,
    BusWitness witness,
    IBeatSource beats,
    IRunnerKiller killer,
    GuardianOptions options,
    EventSource events,
    TimeProvider time)
{
    private static readonly TimeSpan TryAgainAfter = TimeSpan.FromMilliseconds(500);
    private static readonly TimeSpan SwitchOffWithin = TimeSpan.FromSeconds(2);
    private readonly GuardianJudge _judge = new(options);
    private readonly long _start = time.GetTimestamp();
    private Task _switchingOff = Task.CompletedTask;

    /// <summary>Raised when it begins to act, once the runner is ended: here the latch is left. A handler must not
    /// throw.</summary>
    public event Action<string>? Acting;

    /// <summary>What is done once the bus is proved down, before it is watched on. Must not throw.</summary>
    public Func<Task>? AfterProof { get; init; }

    private TimeSpan Now => time.GetElapsedTime(_start);

    /// <summary>Listens until the runner's work is done, or until its own is.</summary>
    public async Task<GuardianEnding> Run()
    {
        GuardianDeed deed = await Listen();
        if (deed == GuardianDeed.Leave)
        {
            await _switchingOff;
            return GuardianEnding.NotNeeded;
        }

        long began = time.GetTimestamp();
        string? lives = deed == GuardianDeed.Act ? await killer.End() : null;
        events.Say(Severity.Alarm, "guardian-acts", $"THE GUARDIAN ACTS: {_judge.Reason}");
        Acting?.Invoke(_judge.Reason);
        if (lives is not null)
        {
            events.Say(
                Severity.Alarm, "guardian-runner-lives",
                $"THE RUNNER MAY STILL LIVE: {lives}; switch the supply off by hand");
        }

        return await MakeSafe(began);
    }

    private async Task<GuardianDeed> Listen()
    {
        Task<Heard>? next = null;
        while (true)
        {
            next ??= beats.Next();
            GuardianDeed deed = GuardianDeed.Listen;
            if (next.IsCompleted || await Comes(next))
            {
                Heard heard = await next;
                next = null;
                Witness(heard);
                deed = _judge.On(heard, Now);
            }
            else
            {
                deed = _judge.OnSilence(Now);
            }

            if (deed == GuardianDeed.SwitchOff)
            {
                BeginSwitchOff();
            }
            else if (deed != GuardianDeed.Listen)
            {
                return deed;
            }
        }
    }

    /// <summary>Whether something comes before silence has lasted too long.</summary>
    private async Task<bool> Comes(Task<Heard> next)
    {
        if (_judge.ActsAt is not { } actsAt)
        {
            await next;
            return true;
        }

        using var over = new CancellationTokenSource();
        TimeSpan rest = actsAt - Now;
        await Task.WhenAny(next, Task.Delay(rest > TimeSpan.Zero ? rest : TimeSpan.Zero, time, over.Token));
        if (!next.IsCompleted)
        {
            await Task.WhenAny(next, Task.Delay(options.Grace, time, over.Token));
        }

        over.Cancel();
        return next.IsCompleted;
    }

    private void Witness(Heard heard)
    {
        if (heard.Kind is not (HeardKind.Malformed or HeardKind.Ended))
        {
            // Each beat says all that is known since the last proof: what was believed before it no longer counts.
            witness.Told(heard.Commanded, heard.Seen, heard.Believed, heard.IsDoubted);
        }
    }

    /// <summary>Beside the runner, which does the same: whoever of the two comes first.</summary>
    private void BeginSwitchOff()
    {
        if (_switchingOff.IsCompleted)
        {
            _switchingOff = Task.WhenAll(own.Select(instrument => Background.Start(() => SwitchOff(instrument))));
        }
    }

    private async Task SwitchOff(ISafeable instrument)
    {
        try
        {
            using var patience = new CancellationTokenSource(SwitchOffWithin, time);
            await instrument.MakeSafe(patience.Token);
        }
        catch (Exception failure)
        {
            events.Say(
                Severity.Warning, "guardian-switch-off",
                $"{instrument.Role} did not confirm that it is off: {failure.Message}");
        }
    }

    /// <summary>Once is not enough where a link comes back: it tries on, within its bound.</summary>
    private async Task<GuardianEnding> MakeSafe(long began)
    {
        while (true)
        {
            SafeStateReport report = await safeState.Reach();
            if (report.Proved)
            {
                events.Say(
                    Severity.Information, "guardian-proved",
                    $"the guardian proved the bus at {report.Voltage:0.0} V, "
                        + $"{time.GetElapsedTime(began).TotalSeconds:0.00} s after it acted");
                if (await StaysDown())
                {
                    return GuardianEnding.ProvedDown;
                }

                began = time.GetTimestamp();
                continue;
            }

            if (time.GetElapsedTime(began) >= options.TryFor)
            {
                events.Say(
                    Severity.Alarm, "guardian-not-proved",
                    "THE GUARDIAN COULD NOT PROVE THE BUS DOWN. Wait, do not open; a licensed person discharges it with a "
                        + "discharge stick by your lab's own procedure");
                return GuardianEnding.NotProved;
            }

            await Task.Delay(TryAgainAfter, time);
        }
    }

    /// <summary>The bleeder stays; the off bias stays too, for what a guardian holds cannot take it away.</summary>
    private async Task<bool> StaysDown()
    {
        if (AfterProof is { } afterProof)
        {
            await afterProof();
        }

        return await safeState.StaysDown(options.WatchAfterProof);
    }
}
