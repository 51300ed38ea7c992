using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Signals.Units;

namespace BenchRunner.Instruments.Roles;

/// <summary>A pulser of two-pulse trains that speaks SCPI.</summary>
public sealed class ScpiPulser : IPulser, IOutput, IDisposable
{
    // Widths are rounded to the pulser's clock, 5 ns and finer, gate levels to its converter's steps (common practice).
    private const double RelativeStep = 1e-3;
    private const double WidthStep = 5e-9;
    private const double GateTolerance = 0.1;
    private const int WaitsForTrigger = 5;

    // A train lasts some 100 us; the count follows when it has ended.
    private static readonly TimeSpan CountPause = TimeSpan.FromMilliseconds(2);
    private static readonly TimeSpan CountWithin = TimeSpan.FromMilliseconds(200);

    private static readonly string[] Operations =
    [
        "set-first-width", "read-first-width", "set-gap", "read-gap", "set-second-width", "read-second-width",
        "set-gate-on", "read-gate-on", "set-gate-off", "read-gate-off", "output-on", "output-off", "read-output",
        "arm", "fire", "inhibit", "read-condition", "read-count",
    ];

    private readonly Instrument _instrument;
    private TrainSettings? _programmed;

    // Stays where making safe takes the leave to arm: widths and levels are not touched by it.
    private TrainSettings? _standing;
    private long? _countWhenArmed;

    private ScpiPulser(Instrument instrument) => _instrument = instrument;

    /// <inheritdoc/>
    public string Role => _instrument.Role;

    /// <inheritdoc/>
    public InstrumentIdentity Identity => _instrument.Session.Identity;

    /// <summary>Connects; nothing is set.</summary>
    /// <exception cref="InstrumentException">Another instrument than the dialect is for, or no pulser.</exception>
    /// <exception cref="LinkException">Not reachable, or no SCPI.</exception>
    public static async Task<ScpiPulser> Connect(InstrumentConnection connection, CancellationToken cancel) =>
        new(await Instrument.Connect("pulser", Operations, "read-count", connection, cancel));

    /// <inheritdoc/>
    public async Task<TrainSettings> Program(Permit permit, TrainSettings train, CancellationToken cancel)
    {
        ArgumentNullException.ThrowIfNull(train);
        Bounded.Live(permit);
        CheckBounds(permit, train);
        await CheckSettings(cancel);
        (_programmed, _standing, _countWhenArmed) = (null, null, null);
        var off = await Gate(permit, "set-gate-off", "read-gate-off", train.GateOff, cancel);
        var on = await Gate(permit, "set-gate-on", "read-gate-on", train.GateOn, cancel);
        var first = await Width(permit, "set-first-width", "read-first-width", train.First, cancel);
        var gap = await Width(permit, "set-gap", "read-gap", train.Gap, cancel);
        var second = await Width(permit, "set-second-width", "read-second-width", train.Second, cancel);
        await _instrument.Session.Energise(permit, _instrument.Command("output-on"), cancel);
        await CheckOutput(true, cancel);
        return _programmed = _standing = new TrainSettings(first, gap, second, on, off);
    }

    /// <inheritdoc/>
    public async Task CheckSettings(CancellationToken cancel)
    {
        if (_standing is not { } set)
        {
            return;
        }

        await Standing("the gate's off level", "read-gate-off", set.GateOff.Value, GateTolerance, "V", cancel);
        await Standing("the gate's on level", "read-gate-on", set.GateOn.Value, GateTolerance, "V", cancel);
        await Standing("the first width", "read-first-width", set.First.Value, WidthTolerance(set.First), "s", cancel);
        await Standing("the gap", "read-gap", set.Gap.Value, WidthTolerance(set.Gap), "s", cancel);
        await Standing(
            "the second width", "read-second-width", set.Second.Value, WidthTolerance(set.Second), "s", cancel);
    }

    /// <inheritdoc/>
    /// <exception cref="InvalidOperationException">Nothing was programmed since the last fault: a caller's
    /// mistake.</exception>
    public async Task Arm(Permit permit, CancellationToken cancel)
    {
        Bounded.Live(permit);
        var train = _programmed ?? throw new InvalidOperationException("program a train before arming");
        _countWhenArmed = null;
        var first = await CheckWidth("set-first-width", "read-first-width", train.First, cancel);
        var gap = await CheckWidth("set-gap", "read-gap", train.Gap, cancel);
        var second = await CheckWidth("set-second-width", "read-second-width", train.Second, cancel);
        CheckBounds(permit, train with { First = first, Gap = gap, Second = second });
        await CheckOutput(true, cancel);
        var count = await ReadCount(cancel);
        await _instrument.Session.Energise(permit, _instrument.Command("arm"), cancel);
        if (!await _instrument.ReadBit("read-condition", WaitsForTrigger, cancel))
        {
            throw _instrument.Refusal("does not wait for its trigger though it was armed");
        }

        _countWhenArmed = count;
    }

    /// <inheritdoc/>
    /// <exception cref="InvalidOperationException">Not armed: a caller's mistake.</exception>
    public async Task Fire(Permit permit, CancellationToken cancel)
    {
        Bounded.Live(permit);
        var before = _countWhenArmed ?? throw new InvalidOperationException("arm before firing");
        _countWhenArmed = null;
        try
        {
            await _instrument.Session.Energise(permit, _instrument.Command("fire"), cancel);
        }
        catch (LinkException lost)
        {
            await FindOut(before, lost, cancel);
            return;
        }

        if (!await _instrument.WaitFor(async c => await ReadCount(c) != before, CountWithin, CountPause, cancel))
        {
            throw _instrument.Refusal("was told to fire and counts no train");
        }

        await CheckCount(before, cancel);
    }

    /// <inheritdoc/>
    public async Task Inhibit(CancellationToken cancel)
    {
        _countWhenArmed = null;
        await _instrument.Session.SetDown([_instrument.Command("inhibit")], cancel);
        await CheckIdle(cancel);
    }

    /// <inheritdoc/>
    public Task<long> ReadCount(CancellationToken cancel) => _instrument.ReadInteger("read-count", cancel);

    /// <inheritdoc/>
    public async Task MakeSafe(CancellationToken cancel)
    {
        (_programmed, _countWhenArmed) = (null, null);
        await Inhibit(cancel);
    }

    /// <inheritdoc/>
    public async Task CheckOffBias(CancellationToken cancel)
    {
        var train = _programmed ?? throw new InvalidOperationException("program a train before the bus rises");
        await CheckOutput(true, cancel);
        await _instrument.CheckReadBack("set-gate-off", "read-gate-off", train.GateOff.Value, GateTolerance, cancel);
    }

    /// <inheritdoc/>
    public async Task TakeOffBiasAway(CancellationToken cancel)
    {
        _programmed = null;
        await _instrument.Session.SetDown([_instrument.Command("output-off")], cancel);
        await CheckOutput(false, cancel);
    }

    /// <inheritdoc/>
    public Task<bool> ReadOutput(CancellationToken cancel) => _instrument.ReadOutputOnce(cancel);

    /// <summary>Closes the link. Sends nothing.</summary>
    public void Dispose() => _instrument.Dispose();

    private static void CheckBounds(Permit permit, TrainSettings train)
    {
        var bounds = permit.Bounds;
        Bounded.AtMost(permit, "first pulse", train.First.Value, bounds.Pulse.Value, "s");
        Bounded.AtMost(permit, "second pulse", train.Second.Value, bounds.Pulse.Value, "s");
        Bounded.AtMost(permit, "gate on level", train.GateOn.Value, bounds.GateOn.Value, "V");
        Bounded.AtLeast(permit, "gate off level", train.GateOff.Value, bounds.GateOff.Value, "V");
        Bounded.NotNegative(train.First.Value, nameof(train));
        Bounded.NotNegative(train.Gap.Value, nameof(train));
        Bounded.NotNegative(train.Second.Value, nameof(train));
        ArgumentOutOfRangeException.ThrowIfGreaterThanOrEqual(train.GateOff.Value, train.GateOn.Value, nameof(train));
    }

    private Task Standing(
        string setting, string readBack, double set, double tolerance, string unit, CancellationToken cancel) =>
        _instrument.CheckStanding(setting, readBack, set, tolerance, unit, cancel);

    private async Task<Seconds> Width(
        Permit permit, string set, string read, Seconds width, CancellationToken cancel) =>
        new(await _instrument.SetGuarded(permit, set, read, width.Value, WidthTolerance(width), cancel));

    private async Task<Seconds> CheckWidth(string set, string read, Seconds width, CancellationToken cancel) =>
        new(await _instrument.CheckReadBack(set, read, width.Value, WidthTolerance(width), cancel));

    private async Task<Volts> Gate(Permit permit, string set, string read, Volts level, CancellationToken cancel) =>
        new(await _instrument.SetGuarded(permit, set, read, level.Value, GateTolerance, cancel));

    private static double WidthTolerance(Seconds width) => (width.Value * RelativeStep) + WidthStep;

    private async Task CheckOutput(bool on, CancellationToken cancel)
    {
        if (await _instrument.ReadBoolean("read-output", cancel) != on)
        {
            throw _instrument.Refusal(
                $"the gate output is {(on ? "off" : "on")} though it was switched {(on ? "on" : "off")}");
        }
    }

    private async Task CheckIdle(CancellationToken cancel)
    {
        if (await _instrument.ReadBit("read-condition", WaitsForTrigger, cancel))
        {
            throw _instrument.Refusal("still waits for a trigger though it was inhibited");
        }
    }

    private async Task CheckCount(long before, CancellationToken cancel)
    {
        var fired = await ReadCount(cancel) - before;
        if (fired != 1)
        {
            throw _instrument.Refusal($"counts {fired} trains where one was fired");
        }
    }

    /// <summary>Whether a train was fired whose reply was lost: asked, never tried again.</summary>
    private async Task FindOut(long before, LinkException lost, CancellationToken cancel)
    {
        long fired;
        try
        {
            fired = await ReadCount(cancel) - before;
        }
        catch (LinkException silent)
        {
            throw new LinkException(
                _instrument.Session.Link, $"whether a train was fired is unknown: {lost.Message}; then "
                    + $"{silent.Message}", lost);
        }

        if (fired != 1)
        {
            throw new LinkException(
                _instrument.Session.Link, $"{fired} trains were fired when the reply was lost: {lost.Message}", lost);
        }

        _instrument.Report(InstrumentEventKind.Doubt, $"one train was fired though its reply was lost: {lost.Message}");
    }
}
