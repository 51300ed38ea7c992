using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Permits;
using BenchRunner.Signals.Units;

namespace BenchRunner.Instruments.Roles;

/// <summary>A DC supply that speaks SCPI.</summary>
public sealed class ScpiSupply : ISupply, IOutput, IDisposable
{
    // A set-point is rounded by the instrument to its own steps: 0.1 % and an absolute step cover supplies of 10 bits
    // and more (common practice). A clipped set-point is off by far more.
    private const double RelativeStep = 1e-3;
    private const double VoltageStep = 0.02;
    private const double CurrentStep = 2e-3;
    private const int CurrentLimitBit = 1;

    private static readonly string[] Operations =
    [
        "set-voltage", "read-voltage", "set-current", "read-current", "set-protection", "read-protection",
        "protection-tripped", "output-on", "output-off", "read-output", "measure-voltage", "measure-current",
        "read-condition",
    ];

    private readonly Instrument _instrument;
    private Standing? _standing;

    private ScpiSupply(Instrument instrument) => _instrument = instrument;

    /// <inheritdoc/>
    public string Role => _instrument.Role;

    /// <inheritdoc/>
    public InstrumentIdentity Identity => _instrument.Session.Identity;

    /// <summary>Connects; nothing is set.</summary>
    /// <exception cref="InstrumentException">Another instrument than the dialect is for, or no supply.</exception>
    /// <exception cref="LinkException">Not reachable, or no SCPI.</exception>
    public static async Task<ScpiSupply> Connect(InstrumentConnection connection, CancellationToken cancel) =>
        new(await Instrument.Connect("supply", Operations, "read-protection", connection, cancel));

    /// <inheritdoc/>
    public async Task Program(Permit permit, Volts voltage, Amperes limit, Volts protection, CancellationToken cancel)
    {
        Bounded.Live(permit);
        Bounded.AtMost(permit, "bus voltage", voltage.Value, permit.Bounds.Voltage.Value, "V");
        Bounded.AtMost(permit, "supply current", limit.Value, permit.Bounds.SupplyCurrent.Value, "A");
        Bounded.NotNegative(voltage.Value, nameof(voltage));
        Bounded.NotNegative(limit.Value, nameof(limit));
        ArgumentOutOfRangeException.ThrowIfLessThan(protection.Value, voltage.Value, nameof(protection));
        Bounded.NotNegative(protection.Value, nameof(protection));

        await CheckSettings(cancel);
        _standing = null;
        await _instrument.SetGuarded(
            permit, "set-protection", "read-protection", protection.Value, Step(protection.Value, VoltageStep), cancel);
        await _instrument.SetGuarded(
            permit, "set-current", "read-current", limit.Value, Step(limit.Value, CurrentStep), cancel);
        await _instrument.SetGuarded(
            permit, "set-voltage", "read-voltage", voltage.Value, Step(voltage.Value, VoltageStep), cancel);
        _standing = new Standing(voltage.Value, limit.Value, protection.Value, false);
    }

    /// <inheritdoc/>
    /// <remarks>A set-point of 0 V is never foreign: making safe leaves it, also over safety's own connection.</remarks>
    public async Task CheckSettings(CancellationToken cancel)
    {
        if (_standing is not { } set)
        {
            return;
        }

        await _instrument.CheckStanding(
            "the over-voltage protection", "read-protection", set.Protection, Step(set.Protection, VoltageStep), "V",
            cancel);
        await _instrument.CheckStanding(
            "the current limit", "read-current", set.Limit, Step(set.Limit, CurrentStep), "A", cancel);
        var voltage = await _instrument.ReadNumber("read-voltage", cancel);
        if (Math.Abs(voltage) <= VoltageStep)
        {
            _standing = set with { OutputOn = false };
            return;
        }

        await _instrument.CheckStanding(
            "the voltage", "read-voltage", set.Voltage, Step(set.Voltage, VoltageStep), "V", cancel);
        if (set.OutputOn && !await _instrument.ReadBoolean("read-output", cancel))
        {
            throw _instrument.Changed("the output", "off", "on");
        }
    }

    /// <inheritdoc/>
    public async Task OutputOn(Permit permit, CancellationToken cancel)
    {
        Bounded.Live(permit);
        var voltage = await _instrument.ReadNumber("read-voltage", cancel);
        var bound = permit.Bounds.Voltage.Value;
        Bounded.AtMost(permit, "set-point of the supply", voltage, bound + Step(bound, VoltageStep), "V");
        await _instrument.Session.Energise(permit, _instrument.Command("output-on"), cancel);
        if (!await _instrument.ReadBoolean("read-output", cancel))
        {
            throw _instrument.Refusal("the output stays off though it was switched on; look for a tripped protection");
        }

        _standing = _standing is { } set ? set with { OutputOn = true } : null;
    }

    /// <inheritdoc/>
    public async Task OutputOff(CancellationToken cancel)
    {
        _standing = _standing is { } set ? set with { OutputOn = false } : null;
        await _instrument.Session.SetDown([_instrument.Command("output-off")], cancel);
        await CheckOff(cancel);
    }

    /// <inheritdoc/>
    public async Task<SupplyState> ReadState(CancellationToken cancel) => new(
        await _instrument.ReadBoolean("read-output", cancel),
        new Volts(await _instrument.ReadNumber("read-voltage", cancel)),
        new Amperes(await _instrument.ReadNumber("read-current", cancel)),
        new Volts(await _instrument.ReadNumber("read-protection", cancel)),
        await _instrument.ReadBoolean("protection-tripped", cancel),
        await _instrument.ReadBit("read-condition", CurrentLimitBit, cancel),
        new Volts(await _instrument.ReadNumber("measure-voltage", cancel)),
        new Amperes(await _instrument.ReadNumber("measure-current", cancel)));

    /// <inheritdoc/>
    public async Task MakeSafe(CancellationToken cancel)
    {
        await _instrument.Session.SetDown(
            [_instrument.Command("output-off"), _instrument.Command("set-voltage", 0)], cancel);
        await CheckOff(cancel);
        await _instrument.CheckReadBack("set-voltage", "read-voltage", 0, VoltageStep, cancel);
    }

    /// <inheritdoc/>
    public Task<bool> ReadOutput(CancellationToken cancel) => _instrument.ReadOutputOnce(cancel);

    /// <summary>Closes the link. Sends nothing.</summary>
    public void Dispose() => _instrument.Dispose();

    private async Task CheckOff(CancellationToken cancel)
    {
        if (await _instrument.ReadBoolean("read-output", cancel))
        {
            throw _instrument.Refusal(
                "the output stays on though it was switched off; use the hardware's emergency stop");
        }
    }

    /// <summary>What was set and read back last.</summary>
    private sealed record Standing(double Voltage, double Limit, double Protection, bool OutputOn);

    private static double Step(double value, double step) => (Math.Abs(value) * RelativeStep) + step;
}
