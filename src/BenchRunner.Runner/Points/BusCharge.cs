using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Supervision;
using BenchRunner.Signals.Units;

namespace BenchRunner.Runner.Points;

/// <summary>Brings the bus to an operating point's voltage and holds the supply against the independent
/// voltmeter.</summary>
public sealed class BusCharge(OpenBench bench, Bench setup, SafetySupervisor supervisor, TimeProvider time)
{
    private readonly Discharge _discharge = new(setup.Bleeder, setup.BusCapacitance);

    /// <summary>How far supply and voltmeter may differ from what was set, relative (a probe or meter is
    /// off).</summary>
    private const double Agreement = 0.03;

    /// <summary>How much of the way from full charge the supply's protection stands above the set-point,
    /// relative.</summary>
    private const double ProtectionMargin = 0.1;

    /// <summary>What a step may take beyond its own bound before the run counts as stuck.</summary>
    private static readonly TimeSpan Slack = TimeSpan.FromSeconds(10);

    private static readonly TimeSpan ReadEvery = TimeSpan.FromMilliseconds(10);

    /// <summary>How long before a train is due the bus is looked at: two readings show that it has settled.</summary>
    private static readonly TimeSpan Ahead = 3 * ReadEvery;

    /// <summary>Programs the supply, switches it on and waits until the voltmeter shows the bus at its
    /// voltage.</summary>
    /// <exception cref="BusException">The bus did not get there, or stayed in current limit: see its
    /// message.</exception>
    public async Task Up(Permit permit, PlannedPoint point, CancellationToken cancel)
    {
        double target = point.Point.BusVoltage;
        double protection = Math.Min(target * (1 + ProtectionMargin), setup.Envelope.Voltage);
        await bench.Supply.Program(
            permit, new Volts(target), new Amperes(setup.ChargingCurrent), new Volts(protection), cancel);

        // Both gates at their off level before there is a voltage for them to hold off.
        await bench.Pulser.CheckOffBias(cancel);
        supervisor.BiasVerified();
        await On(permit, target, cancel);
    }

    /// <summary>Switches the programmed supply on and waits until the voltmeter shows the bus at its voltage.</summary>
    /// <exception cref="BusException">The bus did not get there.</exception>
    public async Task On(Permit permit, double target, CancellationToken cancel)
    {
        // Said before it is done: from here on the bus counts as energised until it is proved down.
        supervisor.Energising(target);
        await bench.Supply.OutputOn(permit, cancel);
        await WaitFor(target, cancel);
    }

    /// <summary>Waits until the next train of a point is due and the bus is back.</summary>
    /// <param name="firing">Knows when the last train was fired.</param>
    /// <param name="state">The point.</param>
    /// <param name="enough">Ends the wait between two readings: the turn is not wanted any more.</param>
    /// <param name="cancel">Ends the work.</param>
    /// <returns>The voltmeter's reading, V; NaN where the turn is not wanted.</returns>
    internal async Task<double> WaitForTurn(
        TrainFiring firing, PointState state, CancellationToken enough, CancellationToken cancel)
    {
        double target = state.Planned.Point.BusVoltage;
        if (firing.FiredAt is not { } fired)
        {
            return await WaitFor(target, cancel, enough);
        }

        // A load that was still carrying current gets longer each time.
        TimeSpan due = TimeSpan.FromSeconds(
            Math.Max(state.Planned.Point.RepeatEvery, state.Planned.Recovery * (1 + state.BaselineInARow)));
        TimeSpan Left() => due - time.GetElapsedTime(fired);
        supervisor.Progress("pausing before the next train", (Left() > TimeSpan.Zero ? Left() : TimeSpan.Zero) + Slack);
        if (!await Pause(Left() - Ahead, enough, cancel))
        {
            return double.NaN;
        }

        double volts = await WaitFor(target, cancel, enough);
        return await Pause(Left(), enough, cancel) ? volts : double.NaN;
    }

    /// <summary>Waits, with output off and bleeder on, until the voltmeter reads less than a voltage.</summary>
    /// <param name="target">The voltage, V.</param>
    /// <param name="cancel">Ends the wait.</param>
    /// <exception cref="BusException">It takes longer than twice the bleeder's time.</exception>
    public async Task WaitBelow(double target, CancellationToken cancel)
    {
        long start = time.GetTimestamp();
        TimeSpan? limit = null;
        while (true)
        {
            double volts = await Read(cancel);
            if (volts < target)
            {
                return;
            }

            limit ??= TimeSpan.FromSeconds(1 + (2 * _discharge.TimeTo(volts, target)));
            if (time.GetElapsedTime(start) > limit)
            {
                throw new BusException(
                    $"the bus is at {volts:0.0} V and does not fall below {target:0.#} V: look at the bleeder", false);
            }

            await Task.Delay(ReadEvery, time, cancel);
        }
    }

    /// <summary>Waits until the voltmeter shows the bus within its tolerance, with a bound from C·ΔV/I.</summary>
    /// <param name="target">The voltage, V.</param>
    /// <param name="cancel">Ends the wait.</param>
    /// <param name="enough">Ends it between two readings.</param>
    /// <returns>The reading, V.</returns>
    /// <exception cref="BusException">The bound passed.</exception>
    public async Task<double> WaitFor(double target, CancellationToken cancel, CancellationToken enough = default)
    {
        long start = time.GetTimestamp();
        double charging = setup.BusCapacitance * target / setup.ChargingCurrent;
        TimeSpan limit = TimeSpan.FromSeconds(2 + (4 * charging));
        supervisor.Progress($"waiting for {target:0.#} V on the bus", limit + Slack);
        double previous = double.NaN;
        while (true)
        {
            double volts = await Read(cancel);

            // Settled: at the voltage, and no longer moving by a tenth of the tolerance between readings.
            if (Math.Abs(volts - target) <= Agreement * target && Math.Abs(volts - previous) <= 0.1 * 0.01 * target)
            {
                return volts;
            }

            if (enough.IsCancellationRequested)
            {
                return double.NaN;
            }

            if (time.GetElapsedTime(start) > limit)
            {
                throw await Explain(target, volts, limit, cancel);
            }

            previous = volts;
            await Task.Delay(ReadEvery, time, cancel);
        }
    }

    /// <summary>What the runner reads, safety's witness sees too: a lead comes off between two polls as well.</summary>
    private async Task<double> Read(CancellationToken cancel)
    {
        long asked = time.GetTimestamp();
        double volts = (await bench.Voltmeter.Read(cancel)).Value;
        if (supervisor.Witness.Saw(Math.Abs(volts), asked) is { } fell && supervisor.HasPermit)
        {
            throw new BusException(fell, stuckInLimit: false);
        }

        return volts;
    }

    /// <summary>Pauses, where there is anything left to wait for.</summary>
    /// <returns>False where it was enough before the end.</returns>
    private async Task<bool> Pause(TimeSpan wait, CancellationToken enough, CancellationToken cancel)
    {
        if (wait <= TimeSpan.Zero)
        {
            return true;
        }

        using var either = CancellationTokenSource.CreateLinkedTokenSource(enough, cancel);
        try
        {
            await Task.Delay(wait, time, either.Token);
            return true;
        }
        catch (OperationCanceledException) when (!cancel.IsCancellationRequested)
        {
            return false;
        }
    }

    private async Task<BusException> Explain(double target, double volts, TimeSpan limit, CancellationToken cancel)
    {
        SupplyState supply = await bench.Supply.ReadState(cancel);
        string seen = $"the bus is at {volts:0.0} V after {limit.TotalSeconds:0.0} s where {target:0.#} V was set";
        if (supply.ProtectionTripped || !supply.OutputOn)
        {
            return new BusException(
                $"{seen}: the supply has switched its output off by itself (over-voltage protection)", false);
        }

        if (Math.Abs(supply.Set.Value - target) > 0.01 * target)
        {
            return new BusException(
                $"{seen}: its set-point is {supply.Set.Value:0.#} V now; another controller or the front panel has changed "
                    + "it",
                false);
        }

        return supply.InCurrentLimit && volts < 0.5 * target
            ? new BusException($"{seen}, the supply in current limit with both gates off: a position is shorted or the "
                + $"bus leaks", true)
            : new BusException(
                $"{seen}, the supply reads {supply.Measured.Value:0.0} V: look at supply, leads and voltmeter", false);
    }
}
