using System.Diagnostics;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Guarding;
using BenchRunner.Safety.Guardians;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Watches;
using BenchRunner.Soak.Simulated;

namespace BenchRunner.Soak.Mixes;

/// <summary>The guardian's logic beside the simulated run: beats over memory, links of its own; it ends the run by
/// cutting every link of the run's.</summary>
internal sealed class MemoryGuardian : IRunGuardian, IRunnerKiller
{
    private static readonly TimeSpan _pipe = TimeSpan.FromMicroseconds(100);

    private readonly Bench _setup;
    private readonly MemoryBench _bench;
    private readonly VirtualTime _time;
    private readonly EventSource _events;
    private readonly MemoryBeats _beats;
    private readonly GuardedBench _guarded;
    private BusWitness? _witness;
    private Task _guarding = Task.CompletedTask;
    private string? _whyLost;
    private Action<string>? _lost;
    private bool _isReady;
    private bool _isDone;
    private long _sent;

    /// <summary>Makes one; it opens nothing before <see cref="Begin"/>.</summary>
    public MemoryGuardian(Bench setup, MemoryBench bench, IEventSink sink, VirtualTime time)
    {
        (_setup, _bench, _time) = (setup, bench, time);
        _events = new EventSource("guardian", sink, time);
        _beats = new MemoryBeats(time, _pipe);
        _guarded = new GuardedBench(
            new BenchLinks(setup, Files.Dialects, null, bench.ConnectGuardian), new InstrumentReports(_events), time);
    }

    /// <inheritdoc/>
    public event Action<string>? Lost
    {
        add
        {
            _lost += value;
            if (_whyLost is { } already)
            {
                value?.Invoke(already);
            }
        }

        remove => _lost -= value;
    }

    /// <inheritdoc/>
    public bool IsAlive => _isReady && _whyLost is null;

    /// <summary>Whether it ended the run.</summary>
    public bool HasEndedRun { get; private set; }

    /// <inheritdoc/>
    public async Task Begin(IReadOnlyDictionary<string, string>? links, CancellationToken cancel)
    {
        try
        {
            await _guarded.Open(cancel);
        }
        catch (Exception failure) when (failure is LinkException or InstrumentException)
        {
            throw new BenchException($"the guardian: {failure.Message}; nothing was energised", failure);
        }

        _isReady = true;
        _guarding = Background.Start(Guard);
    }

    /// <inheritdoc/>
    public void Follow(BusWitness witness) => _witness = witness;

    /// <inheritdoc/>
    public void Beat(BeatKind kind) => Send(kind switch
    {
        BeatKind.Polled => HeardKind.Polled,
        BeatKind.MakingSafe => HeardKind.MakingSafe,
        BeatKind.Done => HeardKind.Done,
        _ => throw new UnreachableException(),
    });

    /// <inheritdoc/>
    public Task<string?> End()
    {
        HasEndedRun = true;
        _bench.CutRunner();
        return Task.FromResult<string?>(null);
    }

    /// <summary>Waits until its work is done, which may be after the run's.</summary>
    public async Task Ended()
    {
        await _guarding;
        await _guarded.DisposeAsync();
    }

    /// <inheritdoc/>
    public async ValueTask DisposeAsync()
    {
        // Before the first beat nothing can have been energised: no permit is granted without it.
        bool leaves = _isDone || _sent == 0;
        Send(leaves ? HeardKind.Done : HeardKind.Left);
        _beats.Write(null);
        if (leaves)
        {
            await Ended();
        }
    }

    private async Task Guard()
    {
        var discharge = new Discharge(_setup.Bleeder, _setup.BusCapacitance);
        var witness = new BusWitness(discharge, _setup.Safety, _time);
        GuardianEnding ending = await new GuardianCore(
            _guarded.Own, new SafeState(_guarded.Roles, witness, _events, _time), witness, _beats, this,
            GuardianOptions.Of(_setup), _events, _time).Run();
        if (ending != GuardianEnding.NotNeeded && !_isDone)
        {
            _whyLost = "the guardian has ended";
            _lost?.Invoke(_whyLost);
        }
    }

    private void Send(HeardKind kind)
    {
        if (!_isDone && _whyLost is null)
        {
            _isDone = kind is HeardKind.Done or HeardKind.Left;
            _beats.Write(BeatText.Write(
                kind, ++_sent, _witness?.HighestCommanded ?? 0, _witness?.HighestSeen ?? 0, _witness?.LastBelieved,
                _witness is { IsDoubted: true }));
        }
    }
}
