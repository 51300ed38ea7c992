using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Watches;

namespace BenchRunner.Safety.Supervision;

/// <summary>Grants permits, watches interlock and bus on connections of its own, trips on any doubt.</summary>
/// <remarks>
/// One a bench and run. The watch polls faster than 10 Hz from <see cref="Start"/> until disposed, also while the bench
/// is being made safe. A trip revokes the permit at once and cancels <see cref="Tripped"/>; the runner's way out is the
/// safe state. Hardware stays the safety function.
/// </remarks>
public sealed class SafetySupervisor : IAsyncDisposable
{
    private readonly Lock _gate = new();
    private readonly SafetyRoles _roles;
    private readonly Envelope _envelope;
    private readonly EventSource _events;
    private readonly TimeProvider _time;
    private readonly SafeState _safeState;
    private readonly Doubt _doubt;
    private readonly Watchdog _watchdog;
    private readonly LoopHold _loop = new();
    private readonly CancellationTokenSource _tripped = new();
    private readonly CancellationTokenSource _end = new();
    private Permit? _permit;
    private Task _watching = Task.CompletedTask;
    private double _lastVoltage = double.NaN;
    private bool _discharging;
    private Task<SafeStateReport>? _reaching;

    /// <summary>Makes a supervisor; nothing is polled before <see cref="Start"/>.</summary>
    public SafetySupervisor(
        SafetyRoles roles, Envelope envelope, Discharge discharge, EventSource events, TimeProvider time)
    {
        ArgumentNullException.ThrowIfNull(events);
        _roles = roles;
        _envelope = envelope;
        _events = events.As("watch");
        _time = time;
        _doubt = new Doubt(envelope);
        _watchdog = new Watchdog(roles.Interlock, Witness, _events, time);
        _safeState = new SafeState(roles.Safeable, Witness, discharge, events.As("safe-state"), time);
    }

    /// <summary>What the voltmeter has shown so far.</summary>
    public BusWitness Witness { get; } = new();

    /// <summary>Raised by a trip, after the safe state was begun and before anybody is woken by it: here the latch is
    /// left. A handler must not throw.</summary>
    public event Action<Trip>? TripMarked;

    /// <summary>Cancelled by a trip.</summary>
    public CancellationToken Tripped => _tripped.Token;

    /// <summary>The trip; null while there was none.</summary>
    public Trip? Trip { get; private set; }

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

    /// <summary>Polls once, in full, arms the controller's watchdog, then goes on polling in a task of its own.</summary>
    /// <exception cref="SafetyException">The first poll found a reason to trip.</exception>
    public async Task Start(CancellationToken cancel)
    {
        if (await Poll(cancel) is { } doubt)
        {
            _watchdog.Found(hasActed: LastInterlock is { WatchdogTripped: true });
            TripNow(doubt);
            throw new SafetyException($"{doubt}; put it right before the bench is used");
        }

        await _watchdog.Arm(cancel);
        _watching = Task.Run(() => Watch(_end.Token), CancellationToken.None);
    }

    /// <summary>Grants leave to energise up to the bounds, after measuring interlock and bus afresh.</summary>
    /// <exception cref="SafetyException">A bound is above the envelope, a trip stands, or the measurement gives a
    /// doubt.</exception>
    public async Task<Permit> Grant(PermitBounds bounds, CancellationToken cancel)
    {
        ArgumentNullException.ThrowIfNull(bounds);
        if (bounds.Voltage.Value > _envelope.Voltage || bounds.Pulse.Value > _envelope.Pulse)
        {
            throw new SafetyException(
                $"{bounds.OperatingPoint}: {bounds.Voltage.Value:0.#} V and pulses of {bounds.Pulse.Value * 1e6:0.##} "
                    + $"us asked "
                    + $"for, the envelope ends at {_envelope.Voltage:0.#} V and {_envelope.Pulse * 1e6:0.##} us; "
                    + $"no permit");
        }

        // What may be left open on an idle bench must be closed before there is leave to energise it.
        if (await Poll(cancel, toEnergise: true) is { } doubt)
        {
            TripNow(doubt);
        }

        lock (_gate)
        {
            if (Trip is not null)
            {
                throw new SafetyException(Trip.Reason);
            }

            _permit?.Revoke("another permit was granted");
            _permit = new Permit(bounds, _time, SafetyLimits.PermitLife);
            _discharging = false;
            return _permit;
        }
    }

    /// <summary>Trips: revokes the permit for good and cancels <see cref="Tripped"/>. The first reason
    /// stands.</summary>
    public void TripNow(string reason)
    {
        if (Mark(reason))
        {
            _ = MakeSafe();
            Wake();
        }
    }

    /// <summary>Keeps the first reason. A watchdog that has acted says that a run was lost, its bus perhaps up.</summary>
    private bool Mark(string reason)
    {
        lock (_gate)
        {
            if (Trip is not null)
            {
                return false;
            }

            _permit?.Revoke(reason);
            bool energised = Witness.MayBeEnergised || LastInterlock is { WatchdogTripped: true };
            Trip = new Trip(reason, _time.GetUtcNow(), energised);
        }

        _events.Say(Severity.Alarm, "trip", $"TRIP: {reason}");
        return true;
    }

    /// <summary>First the mark, then the waiting: a token's callbacks run in no order to rely on.</summary>
    private void Wake()
    {
        TripMarked?.Invoke(Trip!);
        _tripped.Cancel();
    }

    /// <summary>Ends the permit and brings the bench to the safe state. The watch goes on.</summary>
    /// <remarks>A trip starts it by itself; who asks while it is under way gets the same report.</remarks>
    public Task<SafeStateReport> MakeSafe()
    {
        lock (_gate)
        {
            _permit?.Revoke("the bench is being made safe");
            _permit = null;
            _discharging = true;
            if (_reaching is null || _reaching.IsCompleted)
            {
                _reaching = Task.Run(Reach);
            }

            return _reaching;
        }
    }

    private async Task<SafeStateReport> Reach()
    {
        SafeStateReport report = await _safeState.Reach();
        lock (_gate)
        {
            _discharging = !report.Proved;
        }

        // A bench that may be full must not be used by anybody before a person has looked.
        if (!report.Proved && Mark("the bus was not proved down"))
        {
            Wake();
        }

        return report;
    }

    /// <summary>Ends the watch and the permit.</summary>
    public async ValueTask DisposeAsync()
    {
        lock (_gate)
        {
            _permit?.Revoke("the run has ended");
        }

        if (_reaching is { } reaching)
        {
            await reaching;
        }

        await _end.CancelAsync();
        await _watching;
        if (_reaching is { } begunByTheLastPoll)
        {
            await begunByTheLastPoll;
        }

        await _watchdog.Disarm();
        _end.Dispose();
        _tripped.Dispose();
    }

    private async Task Watch(CancellationToken end)
    {
        using var timer = new PeriodicTimer(SafetyLimits.PollEvery, _time);
        try
        {
            while (await timer.WaitForNextTickAsync(end))
            {
                // A poll that has begun is ended by its own patience: cancelling it would leave its reply on the line.
                if (await Poll(CancellationToken.None) is { } doubt)
                {
                    TripNow(doubt);
                }
            }
        }
        catch (OperationCanceledException) when (end.IsCancellationRequested)
        {
            // The run has ended.
        }
    }

    /// <summary>One complete poll; renews the permit where it finds nothing.</summary>
    /// <returns>The doubt, or null.</returns>
    private async Task<string?> Poll(CancellationToken cancel, bool toEnergise = false)
    {
        try
        {
            // A voltage that was read while the bank discharged is judged so, though the proof came in between.
            bool discharging = Volatile.Read(ref _discharging);
            InterlockState interlock = await _roles.Interlock.Read(cancel);
            double volts = Math.Abs((await _roles.Voltmeter.Read(cancel)).Value);
            Volatile.Write(ref _lastVoltage, volts);
            Witness.Saw(volts);
            lock (_gate)
            {
                _loop.Saw(interlock);
                string? doubt = _doubt.Of(
                    interlock, volts, _permit?.Bounds, discharging || _discharging, toEnergise || _loop.IsConfirmed);
                if (doubt is null)
                {
                    _permit?.Renew();
                }

                return doubt;
            }
        }
        catch (OperationCanceledException) when (cancel.IsCancellationRequested)
        {
            throw;
        }
        catch (Exception failure)
        {
            return $"the watch lost sight of the bench: {failure.Message}";
        }
    }
}
