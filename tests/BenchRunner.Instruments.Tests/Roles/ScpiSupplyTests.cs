using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Tests.Scripts;
using BenchRunner.Signals.Units;

namespace BenchRunner.Instruments.Tests.Roles;

public sealed class ScpiSupplyTests : IAsyncLifetime
{
    private const string SetVoltage = "SOURce:VOLTage:LEVel:IMMediate:AMPLitude";

    private readonly ScriptedInstrument _instrument = ScriptedRoles.Supply();
    private readonly Clock _clock = new();
    private readonly Recorder _log = new();
    private readonly CancellationToken _cancel = TestContext.Current.CancellationToken;
    private ScpiSupply _supply = null!;

    public async ValueTask InitializeAsync() =>
        _supply = await ScpiSupply.Connect(ScriptedRoles.To(_instrument, "supply", _clock, _log), _cancel);

    public ValueTask DisposeAsync()
    {
        _supply.Dispose();
        return _instrument.DisposeAsync();
    }

    private Task Program(Permit permit, double volts = 400, double amperes = 0.1, double protection = 440) =>
        _supply.Program(permit, new Volts(volts), new Amperes(amperes), new Volts(protection), _cancel);

    /// <summary>Everything that came after connecting, except what only asks.</summary>
    private string[] Settings() =>
        [.. _instrument.Received.SkipWhile(l => l != "*CLS").Skip(1).Where(l => !l.Contains('?'))];

    [Fact]
    public async Task Protection_current_and_voltage_are_set_in_this_order_and_read_back()
    {
        await Program(Grants.Live());
        await _supply.OutputOn(Grants.Live(), _cancel);

        Assert.Equal(
            ["SOURce:VOLTage:PROTection:LEVel 440", "SOURce:CURRent:LEVel:IMMediate:AMPLitude 0.1", SetVoltage + " 400",
                "OUTPut:STATe 1"],
            Settings());
        var state = await _supply.ReadState(_cancel);
        Assert.Equal(
            new SupplyState(true, new(400), new(0.1), new(440), false, true, new(399.7), new(1.2e-3)),
            state);
    }

    [Theory]
    [InlineData("590")] // a clipped set-point
    [InlineData("0.4")] // a slipped prefix
    [InlineData("9.91E37")]
    public async Task A_set_point_that_reads_back_otherwise_is_refused(string kept)
    {
        _instrument.Keep(SetVoltage, SetVoltage + "?", "0", _ => kept);

        var e = await Assert.ThrowsAsync<InstrumentException>(() => Program(Grants.Live(), 600, 0.1, 660));

        Assert.Equal("supply", e.Role);
    }

    [Fact]
    public async Task A_set_point_rounded_to_the_instruments_steps_is_taken()
    {
        _instrument.Keep(SetVoltage, SetVoltage + "?", "0", _ => "+4.00012000E+02");
        await Program(Grants.Live());
    }

    [Fact]
    public async Task Beyond_the_permits_bounds_nothing_is_written()
    {
        await Assert.ThrowsAsync<PermitException>(() => Program(Grants.Live(), volts: 601, protection: 700));
        await Assert.ThrowsAsync<PermitException>(() => Program(Grants.Live(), amperes: 0.51));
        await Assert.ThrowsAsync<PermitException>(() => Program(Grants.Live(), volts: double.NaN));
        await Assert.ThrowsAnyAsync<ArgumentException>(() => Program(Grants.Live(), volts: -1));
        await Assert.ThrowsAnyAsync<ArgumentException>(() => Program(Grants.Live(), volts: 500, protection: 400));

        await _supply.ReadState(_cancel);
        Assert.Empty(Settings());
    }

    [Fact]
    public async Task With_a_dead_permit_or_none_nothing_is_written()
    {
        await Assert.ThrowsAsync<ArgumentNullException>(() => Program(null!));
        await Assert.ThrowsAsync<ArgumentNullException>(() => _supply.OutputOn(null!, _cancel));
        await Assert.ThrowsAsync<PermitException>(() => Program(Grants.Revoked()));
        await Assert.ThrowsAsync<PermitException>(() => _supply.OutputOn(Grants.Revoked(), _cancel));
        var overdue = Grants.Live(_clock);
        _clock.Advance(TimeSpan.FromMinutes(6));
        await Assert.ThrowsAsync<PermitException>(() => _supply.OutputOn(overdue, _cancel));

        await _supply.ReadState(_cancel);
        Assert.Empty(Settings());
    }

    [Fact]
    public async Task A_permit_that_dies_while_a_value_is_read_back_ends_the_setting()
    {
        var permit = Grants.Live();
        _instrument.Once("SOURce:CURRent:LEVel:IMMediate:AMPLitude?", v =>
        {
            Grants.Revoke(permit, "interlock open");
            return v.Line("0.1");
        });

        var e = await Assert.ThrowsAsync<PermitException>(() => Program(permit));

        Assert.Contains("interlock open", e.Message, StringComparison.Ordinal);
        Assert.Equal(2, Settings().Length);
        Assert.DoesNotContain(Settings(), l => l.StartsWith(SetVoltage, StringComparison.Ordinal));
    }

    [Fact]
    public async Task The_output_is_not_switched_on_where_the_set_point_lies_above_the_permit()
    {
        await Program(Grants.Live(), 600, 0.1, 660);
        var proving = Grants.Live(bounds: Grants.Bounds with { Voltage = new(60) });

        await Assert.ThrowsAsync<PermitException>(() => _supply.OutputOn(proving, _cancel));

        Assert.DoesNotContain("OUTPut:STATe 1", _instrument.Received);
    }

    [Fact]
    public async Task The_safe_side_needs_no_permit_and_is_read_back()
    {
        await Program(Grants.Live());
        await _supply.OutputOn(Grants.Live(), _cancel);

        await _supply.MakeSafe(_cancel);

        Assert.Equal(["OUTPut:STATe 0", SetVoltage + " 0"], Settings()[^2..]);
        var state = await _supply.ReadState(_cancel);
        Assert.Equal((false, 0.0), (state.OutputOn, state.Set.Value));
    }

    [Fact]
    public async Task An_output_that_stays_on_is_said_loudly()
    {
        _instrument.On("OUTPut:STATe?", "1");
        var e = await Assert.ThrowsAsync<InstrumentException>(() => _supply.OutputOff(_cancel));
        Assert.Contains("stays on", e.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task After_a_new_connection_setting_down_works_and_energising_is_refused()
    {
        _instrument.Once("OUTPut:STATe?", v => v.HangUp());
        await Assert.ThrowsAsync<Instruments.Links.LinkException>(() => _supply.OutputOff(_cancel));
        await _supply.MakeSafe(_cancel);

        await Assert.ThrowsAsync<Instruments.Links.LinkException>(() => Program(Grants.Live()));
        Assert.DoesNotContain(SetVoltage + " 400", _instrument.Received);
        Assert.Equal(2, _instrument.Visits);
    }
}
