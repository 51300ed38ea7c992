using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Safety.Guardians;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Watches;
using BenchRunner.Signals.Units;

namespace BenchRunner.Safety.Supervision;

/// <summary>Grants permits, watches interlock and bus on connections of its own, trips on any doubt.</summary>
/// <remarks>
/// One a bench and run. What may follow what is <see cref="SupervisorTable"/>'s word; here it is done. The watch polls
/// faster than 10 Hz from <see cref="Start"/> until disposed, also while the bench is being made safe and after. A trip
/// revokes the permit at once and cancels <see cref="Tripped"/>; the runner's way out is the safe state. Hardware stays
/// the safety function.
/// </remarks>
public sealed class SafetySupervisor : IAsyncDisposable
{
    private readonly Lock _gate = new();
    private readonly SafetyRoles _roles;
    private readonly Envelope _envelope;
    private readonly IGuardian _guardian;
    private readonly EventSource _events;
    private readonly TimeProvider _time;
    private readonly SafeState _safeState;
    private readonly PollJudge _judge;
    private readonly Watchdog _watchdog;
    private readonly Progress _progress;
    private readonly LoopHold _loop = new();
    private readonly CancellationTokenSource _tripped = new();
    private readonly WatchLoop _watch;
    private readonly IReadOnlyList<Heartbeat> _heartbeats;
    private SupervisorState _state = SupervisorState.Unwatched;
    private Permit? _permit;
    private double _lastVoltage = double.NaN;
    private Task<SafeStateReport>? _reaching;

    /// <summary>Makes a supervisor; nothing is polled before <see cref="Start"/>.</summary>
    /// <param name="roles">Safety's own connections.</param>
    /// <param name="envelope">The bench's hard ceiling.</param>
    /// <param name="witness">Of the bench's voltmeter; fresh.</param>
    /// <param name="guardian">Without it nothing is energised.</param>
    /// <param name="events">Takes what happens.</param>
    /// <param name="time">The clock.</param>
    public SafetySupervisor(
        SafetyRoles roles,
        Envelope envelope,
        BusWitness witness,
        IGuardian guardian,
        EventSource events,
        TimeProvider time)
    {
        ArgumentNullException.ThrowIfNull(events);
        ArgumentNullException.ThrowIfNull(witness);
        ArgumentNullException.ThrowIfNull(guardian);
        _roles = roles;
        _envelope = envelope;
        Witness = witness;
        _guardian = guardian;
        _events = events.As("watch");
        _time = time;
        _judge = new PollJudge(envelope, witness);
        _progress = new Progress(time);
        _watch = new WatchLoop(witness, time)
        {
            Poll = () => Poll(CancellationToken.None),
            Found = found => Act(
                found.Kind != SupervisorEvent.Doubt && _progress.Overdue is { } late
                    ? new Finding(SupervisorEvent.Overdue, late) : found,
                beats: true),
            Late = why =>
            {
                if (Trip is null)
                {
                    Raise(SupervisorEvent.Doubt, why);
                }
            },
            Waiting = BeatWhileTripped,
        };
        _heartbeats =
        [
            .. Heartbeat(roles.SupplyOutput, static (_, _) => { }),
            .. Heartbeat(roles.PulserOutput, GatesHeld),
        ];
        _watchdog = new Watchdog(roles.Interlock, witness, _events, time);
        _safeState = new SafeState(roles.Safeable, witness, events.As("safe-state"), time)
        {
            Round = BeatWhileTripped,
            AfterProof = roles.Pulser.TakeOffBiasAway,
        };
        guardian.Lost += why => Raise(SupervisorEvent.GuardianLost, why);
    }

    /// <summary>What the voltmeter has shown so far.</summary>
    public BusWitness Witness { get; }

    /// <summary>Raised by a trip, after the safe state was begun and before anybody is woken by it: here the latch is
    /// left. A handler must not throw.</summary>
    public event Action<Trip>? TripMarked;

    /// <summary>Cancelled by a trip.</summary>
    public CancellationToken Tripped => _tripped.Token;

    /// <summary>The trip; null while there was none.</summary>
    public Trip? Trip { get; private set; }

    /// <summary>Where the run stands.</summary>
    public SupervisorState State
    {
        get
        {
            lock (_gate)
            {
                return _state;
            }
        }
    }

    /// <summary>Whether there is leave to energise: a voltage that falls now falls by itself.</summary>
    public bool HasPermit => SupervisorTable.HasPermit(State);

    /// <summary>The voltmeter's last reading by the watch, V; NaN before the first.</summary>
    public double LastVoltage => Volatile.Read(ref _lastVoltage);

    /// <summary>What the interlock controller said at the last poll; null before the first.</summary>
    public InterlockState? LastInterlock => _loop.Last;

    /// <summary>How often the loop was found open after it was closed, or at the first poll.</summary>
    public int LoopOpenings => _loop.Openings;

    /// <summary>Holds a person's confirmation to the closing it was given for: until <see cref="EndConfirmed"/> an open
    /// loop is a trip, also while nothing is charged.</summary>
    /// <param name="openings"><see cref="LoopOpenings"/> when the person was asked.</param>
    /// <returns>False: the loop is open, or was in between; the confirmation is void.</returns>
    public bool HoldConfirmed(int openings)
    {
        lock (_gate)
        {
            return _loop.Confirm(openings);
        }
    }

    /// <summary>Ends what <see cref="HoldConfirmed"/> began: the device's run is over, the enclosure may be
    /// opened.</summary>
    public void EndConfirmed()
    {
        lock (_gate)
        {
            _loop.End();
        }
    }

    /// <summary>Says what the runner is at; where it says nothing else in time, that is a trip, and no heartbeat goes to
    /// the guardian any more. The safe state ends it.</summary>
    /// <param name="what">In words, e.g. <c>charging the bus</c>.</param>
    /// <param name="within">The longest it may take.</param>
    public void Progress(string what, TimeSpan within) => _progress.At(what, within);

    /// <summary>Polls once, in full, arms the controller's watchdog, then goes on polling in a task of its own.</summary>
    /// <exception cref="SafetyException">The first poll found a reason to trip, or the guardian is not there.</exception>
    public async Task Start(CancellationToken cancel)
    {
        Finding found = await Poll(cancel);
        if (Act(found) is { } wrong)
        {
            _watchdog.Found(hasActed: LastInterlock is { WatchdogTripped: true });
            throw new SafetyException($"{wrong}; put it right before the bench is used");
        }

        lock (_gate)
        {
            Demand(SupervisorEvent.WatchBegins, null, "the watch");
        }

        await _watchdog.Arm(cancel);
        _watch.Begin();
        foreach (Heartbeat heartbeat in _heartbeats)
        {
            heartbeat.Begin();
        }
    }

    /// <summary>Grants leave to energise up to the bounds, after measuring interlock and bus afresh.</summary>
    /// <exception cref="SafetyException">A bound is above the envelope, a trip stands, the guardian is not there, or the
    /// measurement gives a doubt.</exception>
    public async Task<Permit> Grant(PermitBounds bounds, CancellationToken cancel)
    {
        ArgumentNullException.ThrowIfNull(bounds);
        if (!IsInside(bounds))
        {
            throw new SafetyException(
                $"{bounds.OperatingPoint}: {bounds.Voltage.Value:0.#} V and pulses of {bounds.Pulse.Value * 1e6:0.##} "
                    + $"us asked for, the envelope ends at {_envelope.Voltage:0.#} V and {_envelope.Pulse * 1e6:0.##} "
                    + "us; no permit");
        }

        // What may be left open on an idle bench must be closed before there is leave to energise it.
        Act(await Poll(cancel, toEnergise: true));
        lock (_gate)
        {
            Demand(SupervisorEvent.PermitAsked, bounds, bounds.OperatingPoint);
            return _permit!;
        }
    }

    /// <summary>The pulser was read back: both gates are held at their off level, before the bus rises.</summary>
    /// <exception cref="SafetyException">There is no live permit, or what it rests on is gone.</exception>
    public void BiasVerified()
    {
        lock (_gate)
        {
            Demand(SupervisorEvent.BiasVerified, _permit?.Bounds, "the off bias of the gates");
        }
    }

    /// <summary>The supply is about to be switched on: from here on the bus counts as energised until it is proved
    /// down.</summary>
    /// <param name="voltage">What it is set to, V.</param>
    /// <exception cref="SafetyException">The off bias was not verified, there is no live permit, or what it rests on is
    /// gone; nothing may be switched on.</exception>
    public void Energising(double voltage)
    {
        lock (_gate)
        {
            Demand(SupervisorEvent.Energising, _permit?.Bounds, "switching the supply on");
            Witness.Commanded(voltage);
        }
    }

    /// <summary>Trips: revokes the permit for good and cancels <see cref="Tripped"/>. The first reason
    /// stands.</summary>
    public void TripNow(string reason) => Raise(SupervisorEvent.Doubt, reason);

    /// <summary>The reply to a command that energises or fires was lost: what it did is unknown, it is never sent again,
    /// and the bench is made safe.</summary>
    public void ReplyLost(string reason) => Raise(SupervisorEvent.ReplyLost, reason);

    /// <summary>Looks at the interlock once more before a refusal of an instrument is named as the reason: where the loop
    /// has opened the supply, it was not the supply's doing.</summary>
    public async Task LookForRootCause()
    {
        if (Trip is null)
        {
            Act(await Poll(CancellationToken.None));
        }
    }

    /// <summary>Ends the permit and brings the bench to the safe state. The watch goes on.</summary>
    /// <remarks>A trip starts it by itself; who asks while it is under way gets the same report.</remarks>
    public Task<SafeStateReport> MakeSafe()
    {
        lock (_gate)
        {
            _ = Apply(SupervisorEvent.StopAsked, null, "the bench is being made safe");
            return _reaching!;
        }
    }

    /// <summary>Ends the watch and the permit, by way of the safe state where there still is one.</summary>
    public async ValueTask DisposeAsync()
    {
        while (End() is { } reaching)
        {
            await reaching;
        }

        // Before the watch, which beats on: a last answer may be long in coming.
        foreach (Heartbeat heartbeat in _heartbeats)
        {
            await heartbeat.End();
            heartbeat.Dispose();
        }

        await _watch.End(() => _guardian.Beat(BeatKind.MakingSafe));
        if (!Witness.MayBeEnergised)
        {
            // Before the interlock is told, which may be slow to answer: nothing will be energised any more.
            _guardian.Beat(BeatKind.Done);
        }

        await _watchdog.Disarm();
        _watch.Dispose();
        _tripped.Dispose();
    }

    private IEnumerable<Heartbeat> Heartbeat(IOutput? output, Action<SupervisorState, bool> answered) =>
        output is null ? [] :
        [
            new Heartbeat(output, TimeSpan.FromSeconds(Witness.Limits.ReplyWithin), _time)
            {
                State = () => State,
                Answered = answered,
                Silent = why =>
                {
                    if (HasPermit && Witness.MayBeEnergised)
                    {
                        Raise(SupervisorEvent.Doubt, why);
                    }
                },
            },
        ];

    private void GatesHeld(SupervisorState asked, bool isOn)
    {
        if (!isOn && asked is (SupervisorState.Biased or SupervisorState.Energised) && HasPermit)
        {
            Raise(SupervisorEvent.Doubt, "the pulser's output is off with the bus up: nothing holds the gates off");
        }
    }

    private Task<SafeStateReport>? End()
    {
        lock (_gate)
        {
            SupervisorStep step = Apply(SupervisorEvent.Ends, null, "the run has ended");
            return step.To == SupervisorState.Ended ? null : _reaching;
        }
    }

    /// <summary>Takes an event for which there must be leave; under the lock.</summary>
    private void Demand(SupervisorEvent what, PermitBounds? bounds, string who)
    {
        SupervisorStep step = Apply(what, bounds, "another permit was granted");
        if (!step.IsAllowed)
        {
            throw new SafetyException(
                Trip?.Reason ?? _permit?.WhyNot ?? $"{who}: {SupervisorWords.Why(step, _guardian)}; nothing is energised");
        }
    }

    /// <summary>Asks the table and does what it says to the permit and the safe state; under the lock.</summary>
    private SupervisorStep Apply(SupervisorEvent what, PermitBounds? bounds, string reason)
    {
        SupervisorStep step = SupervisorTable.Standard.Step(_state, what, Facts(bounds));
        _state = step.To;
        if (step.Acts.HasFlag(SupervisorActs.Revoke) || step.Acts.HasFlag(SupervisorActs.Issue))
        {
            _permit?.Revoke(reason);
            _permit = step.Acts.HasFlag(SupervisorActs.Issue)
                ? new Permit(bounds!, _time, SafetyLimits.PermitLife) : null;
        }

        if (step.Acts.HasFlag(SupervisorActs.Renew))
        {
            _permit?.Renew();
        }

        if (step.Acts.HasFlag(SupervisorActs.MakeSafe))
        {
            _progress.None();
            if (_reaching is null || _reaching.IsCompleted)
            {
                _reaching = Background.Start(Reach);
            }
        }

        return step;
    }

    private SupervisorFacts Facts(PermitBounds? bounds) =>
        (LastInterlock is { LoopClosed: true } ? SupervisorFacts.LoopClosed : SupervisorFacts.None)
        | (_guardian.IsAlive ? SupervisorFacts.GuardianAlive : SupervisorFacts.None)
        | (bounds is not null && IsInside(bounds) ? SupervisorFacts.EnvelopeKnown : SupervisorFacts.None)
        | (_permit is { WhyNot: null } ? SupervisorFacts.PermitLive : SupervisorFacts.None)
        | (Trip is null ? SupervisorFacts.NoLatch : SupervisorFacts.None);

    private bool IsInside(PermitBounds bounds) =>
        bounds.Voltage.Value <= _envelope.Voltage && bounds.Pulse.Value <= _envelope.Pulse;

    /// <summary>Takes an event that may trip. The first reason stands, and the mark comes before the waking: a token's
    /// callbacks run in no order to rely on.</summary>
    private void Raise(SupervisorEvent what, string reason)
    {
        SupervisorStep step;
        lock (_gate)
        {
            // A watchdog that has acted says that a run was lost, its bus perhaps up.
            bool energised = Witness.MayBeEnergised || LastInterlock is { WatchdogTripped: true };
            step = Apply(what, null, reason);
            if (step.Acts.HasFlag(SupervisorActs.Latch))
            {
                Trip = new Trip(reason, _time.GetUtcNow(), energised);
            }
        }

        if (step.Acts.HasFlag(SupervisorActs.Alarm))
        {
            _events.Say(Severity.Alarm, "bus-risen", $"ALARM: {reason}. WAIT; DO NOT OPEN the enclosure.");
        }

        if (step.Acts.HasFlag(SupervisorActs.Latch))
        {
            _events.Say(Severity.Alarm, "trip", $"TRIP: {reason}");
            TripMarked?.Invoke(Trip!);
            _tripped.Cancel();
        }
    }

    private async Task<SafeStateReport> Reach()
    {
        SafeStateReport report = await _safeState.Reach();

        // A bench that may be full must not be used by anybody before a person has looked.
        Raise(report.Proved ? SupervisorEvent.ProvedDown : SupervisorEvent.NotProved, "the bus was not proved down");
        return report;
    }

    private void BeatWhileTripped()
    {
        if (SupervisorTable.IsTrip(State))
        {
            _guardian.Beat(BeatKind.MakingSafe);
        }
    }

    /// <summary>Does what a poll's finding asks for.</summary>
    /// <returns>What is wrong; null where the run may go on.</returns>
    private string? Act(Finding found, bool beats = false)
    {
        if (found.Kind is not (SupervisorEvent.Sound or SupervisorEvent.LoopOpen))
        {
            Raise(found.Kind, found.Reason!);
            BeatWhileTripped();
            return found.Reason;
        }

        SupervisorStep step;
        lock (_gate)
        {
            step = SupervisorTable.Standard.Step(_state, found.Kind, SupervisorFacts.None);
            if (!step.Acts.HasFlag(SupervisorActs.Latch))
            {
                _ = Apply(found.Kind, null, "");
            }
        }

        if (step.Acts.HasFlag(SupervisorActs.Latch))
        {
            Raise(found.Kind, found.Reason!);
            return found.Reason;
        }

        if (!step.Acts.HasFlag(SupervisorActs.Beat))
        {
            BeatWhileTripped();
        }
        else if (beats)
        {
            _guardian.Beat(BeatKind.Polled);
        }

        return null;
    }

    /// <summary>One complete poll.</summary>
    private async Task<Finding> Poll(CancellationToken cancel, bool toEnergise = false)
    {
        try
        {
            SupervisorState before = State;
            long asked = _time.GetTimestamp();

            // Both at once: a poll lasts as long as one slow reply and not two, or the guardian would take two for a hang.
            Task<InterlockState> loop = _roles.Interlock.Read(cancel);
            Task<Volts> bus = _roles.Voltmeter.Read(cancel);
            await Task.WhenAll(loop, bus);
            InterlockState interlock = await loop;
            double volts = Math.Abs((await bus).Value);
            Volatile.Write(ref _lastVoltage, volts);
            var reading = new PollReading(interlock, volts, Witness.Saw(volts, asked), before);
            lock (_gate)
            {
                _loop.Saw(interlock);
                return _judge.Of(reading, _permit?.Bounds, _state, toEnergise || _loop.IsConfirmed);
            }
        }
        catch (OperationCanceledException) when (cancel.IsCancellationRequested)
        {
            throw;
        }
        catch (Exception failure)
        {
            return new Finding(SupervisorEvent.Doubt, $"the watch lost sight of the bench: {failure.Message}");
        }
    }
}
