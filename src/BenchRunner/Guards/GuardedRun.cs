using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Files;
using BenchRunner.Files;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Guarding;
using BenchRunner.Safety.Guardians;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Watches;

namespace BenchRunner.Guards;

/// <summary>The guardian's process: files, pipe, links; then <see cref="GuardianCore"/>.</summary>
/// <param name="benchFile">The bench file.</param>
/// <param name="logFile">Where it writes what it did; null: beside the bench file.</param>
/// <param name="runner">Number of the runner's process; null: none is ended.</param>
internal sealed class GuardedRun(string benchFile, string? logFile, int? runner)
{
    private readonly PipeBeats _pipe = new(System.Console.OpenStandardInput(), System.Console.OpenStandardOutput());
    private readonly TimeProvider _time = TimeProvider.System;

    /// <summary>Guards until the run is done, or until the bench is safe.</summary>
    public async Task<int> Run()
    {
        using RunnerProcess? held = runner is { } number ? RunnerProcess.Hold(number) : null;
        await using var log = new GuardianLog(logFile ?? GuardianLog.PathOf(benchFile), System.Console.Error);
        var events = new EventSource("guardian", log, _time);
        GuardedBench guarded;
        Bench bench;
        try
        {
            (bench, BenchLinks? links) = await Begin();
            if (links is null)
            {
                return ExitCode.Done;
            }

            var trouble = new LinkTrouble(new InstrumentReports(events));
            guarded = new GuardedBench(links, trouble, _time);
            await guarded.Open(CancellationToken.None);
        }
        catch (Exception failure)
        {
            _pipe.Say($"unable {Ending.Explain(failure, CancellationToken.None).Message.ReplaceLineEndings("; ")}");
            throw;
        }

        await using (guarded)
        {
            _pipe.Say($"ready {bench.Source.Sha256}");
            return await Guard(bench, guarded, held, events);
        }
    }

    private async Task<int> Guard(Bench bench, GuardedBench guarded, RunnerProcess? held, EventSource events)
    {
        var discharge = new Discharge(bench.Bleeder, bench.BusCapacitance);
        var witness = new BusWitness(discharge, bench.Safety, _time);
        var mark = new LatchMark(bench, events, _time);
        var core = new GuardianCore(
            guarded.Own,
            new SafeState(guarded.Roles, witness, events, _time),
            witness, _pipe, held ?? (IRunnerKiller)new NoRunner(), GuardianOptions.Of(bench), events, _time)
        {
            AfterProof = async () =>
            {
                if (await mark.Stands())
                {
                    await TakeOffWatchdog(guarded, events);
                }
            },
        };
        core.Acting += reason =>
        {
            if (witness.MayBeEnergised)
            {
                mark.Begin(reason);
            }
        };
        switch (await core.Run())
        {
            case GuardianEnding.NotNeeded:
            case GuardianEnding.ProvedDown:
                return ExitCode.Done;
            default:
                await mark.Stands();
                return ExitCode.Safety;
        }
    }

    /// <summary>Reads the bench file; hears where the instruments are, up to <c>begin</c>.</summary>
    /// <returns>No links: the run ended before it began.</returns>
    private async Task<(Bench Bench, BenchLinks? Links)> Begin()
    {
        var problems = new List<Problem>();
        BenchFiles files = BenchFiles.Read(benchFile, problems);
        if (problems.Count > 0)
        {
            throw new InputException(string.Join(Environment.NewLine, problems));
        }

        var links = new Dictionary<string, string>();
        while (await _pipe.Line() is var line && line != "begin")
        {
            // A run that was refused before anything was done lets its guardian go.
            if (line is null || line.StartsWith("done ", StringComparison.Ordinal))
            {
                return (files.Bench!, null);
            }

            if (line.Split(' ', 3) is not ["link", { } role, { } link])
            {
                throw new InputException($"'{Console.Screen.Printable(line)}' came where 'link ROLE LINK' or 'begin' was "
                    + "expected");
            }

            links[role] = link;
        }

        return (files.Bench!, new BenchLinks(
            files.Bench!, files.Dialects, links.Count > 0 ? links : null, InstrumentConnection.Wire));
    }

    private async Task TakeOffWatchdog(GuardedBench guarded, EventSource events)
    {
        try
        {
            using var patience = new CancellationTokenSource(TimeSpan.FromSeconds(2), _time);
            await guarded.TakeOffWatchdog(patience.Token);
        }
        catch (Exception failure)
        {
            events.Say(
                Severity.Warning, "guardian-watchdog-left", $"the interlock's watchdog stays armed: {failure.Message}");
        }
    }

    private sealed class NoRunner : IRunnerKiller
    {
        public Task<string?> End() => Task.FromResult<string?>(null);
    }
}
