using BenchRunner.Runner.Sessions;
using BenchRunner.Soak.Simulated;
using FakeBench.Fixtures;
using FakeBench.Population;

namespace BenchRunner.Soak.Mixes;

/// <summary>One mix through a whole run in simulated time: runner, safety, evidence and instruments as they are, links
/// and clock in memory.</summary>
internal sealed class Trial
{
    /// <summary>A run of these small sequences ends within a minute, also the long way round; what is not at its end by
    /// then hangs.</summary>
    private static readonly TimeSpan _within = TimeSpan.FromMinutes(10);

    private readonly Mix _mix;
    private readonly Func<Facts, IEnumerable<string>> _judge;

    private Trial(Mix mix, Func<Facts, IEnumerable<string>> judge) => (_mix, _judge) = (mix, judge);

    /// <summary>Runs a mix and judges it.</summary>
    /// <param name="mix">The mix.</param>
    /// <param name="trains">Where trains are computed; may be shared by trials that follow each other.</param>
    /// <param name="parent">Folder in which the trial's own one is made and deleted.</param>
    /// <param name="judge">Says what is wrong, while the folder is there; null: <see cref="Judgement.Of"/>.</param>
    public static Judged Run(
        Mix mix, TrainCache trains, string parent, Func<Facts, IEnumerable<string>>? judge = null)
    {
        string folder = Directory.CreateDirectory(
            Path.Combine(parent, FormattableString.Invariant($"mix-{mix.Seed}"))).FullName;
        try
        {
            return new Trial(mix, judge ?? Judgement.Of).Run(trains, folder);
        }
        finally
        {
            Directory.Delete(folder, recursive: true);
        }
    }

    private Judged Run(TrainCache trains, string folder)
    {
        var time = new VirtualTime();
        var recorder = new Recorder(time, folder);
        var ways = new SplitMix(SplitMix.Key("latency", (long)_mix.Seed));
        var bench = new MemoryBench(
            new BenchSetup(new BenchValues(5), _mix.Device), _mix.Faults, time,
            () => TimeSpan.FromSeconds(_mix.Latency * (0.5 + ways.NextUniform())), trains);
        using var operatorStop = new CancellationTokenSource();
        if (_mix.Interrupted is { } at)
        {
            time.After(TimeSpan.FromSeconds(at), operatorStop.Cancel);
        }

        if (_mix.Stepped is { } step)
        {
            time.After(TimeSpan.FromSeconds(step.At), () => time.StepWallClock(TimeSpan.FromSeconds(step.By)));
        }

        RunRequest request = new()
        {
            Plan = Files.Plan(_mix, folder),
            Dialects = Files.Dialects,
            EvidencePath = Path.Combine(folder, "evidence.db"),
            Operator = "A. Person",
        };
        MemoryGuardian? guardian = null;
        var session = new RunSession(request, recorder, new Person(!_mix.Declined), time)
        {
            Opener = bench.Connect,
            Guardian = (setup, _, _) => guardian = new MemoryGuardian(setup, bench, recorder, time),
        };
        RunSummary? summary = null;
        Exception? ended = null;
        try
        {
            new OneThread(time).Run(
                async () =>
                {
                    try
                    {
                        summary = await session.Run(new OneDevice(_mix.Device), operatorStop.Token);
                    }
                    finally
                    {
                        await (guardian?.Ended() ?? Task.CompletedTask);
                    }
                },
                _within);
        }
        catch (SimulationException hung)
        {
            return new Judged(_mix, recorder.Lines, hung.Message);
        }
        catch (Exception broken)
        {
            ended = broken;
        }

        var facts = new Facts(_mix, bench, recorder, summary, ended, operatorStop.IsCancellationRequested, folder)
        {
            RunWasEnded = guardian is { HasEndedRun: true },
        };
        recorder.Note($"bank at {facts.BankVoltage:0.000} V, exit code {facts.ExitCode}, {ended?.Message}");
        return new Judged(_mix, recorder.Lines, string.Join("; ", _judge(facts)));
    }
}
