using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Tests.Scripts;

namespace BenchRunner.Instruments.Tests.Roles;

/// <summary>Voltmeter, interlock and hotplate, and what connecting refuses.</summary>
public class OtherRolesTests
{
    private readonly CancellationToken _cancel = TestContext.Current.CancellationToken;
    private readonly Recorder _log = new();

    private InstrumentConnection To(ScriptedInstrument instrument, string role, string? identity = null) =>
        ScriptedRoles.To(instrument, role, new Clock(), _log, identity);

    [Fact]
    public async Task The_voltmeter_reads_the_bank()
    {
        await using var instrument = ScriptedRoles.Voltmeter();
        using var voltmeter = await ScpiVoltmeter.Connect(To(instrument, "voltmeter"), _cancel);
        Assert.Equal(400.012, (await voltmeter.Read(_cancel)).Value, 1e-12);
    }

    [Theory]
    [InlineData("9.9E37", "overload")]
    [InlineData("-9.9E37", "overload")]
    [InlineData("9.91E37", "no number")]
    public async Task A_reading_that_is_none_is_refused(string reading, string named)
    {
        await using var instrument = ScriptedRoles.Voltmeter(reading);
        using var voltmeter = await ScpiVoltmeter.Connect(To(instrument, "voltmeter"), _cancel);
        var e = await Assert.ThrowsAsync<InstrumentException>(() => voltmeter.Read(_cancel));
        Assert.Contains(named, e.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_source_is_no_independent_voltmeter()
    {
        await using var instrument = ScriptedRoles.Supply();
        instrument.On("MEASure:VOLTage:DC?", "400");
        var e = await Assert.ThrowsAsync<InstrumentException>(
            () => ScpiVoltmeter.Connect(To(instrument, "voltmeter"), _cancel));
        Assert.Contains("no independent voltmeter", e.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task The_interlock_says_four_things_and_works_its_relay()
    {
        await using var instrument = ScriptedRoles.Interlock();
        using var interlock = await ScpiInterlock.Connect(To(instrument, "interlock"), _cancel);

        Assert.Equal(new InterlockState(true, false, true, false), await interlock.Read(_cancel));
        await interlock.ReleaseBleeder(Grants.Live(), _cancel);
        await Assert.ThrowsAsync<PermitException>(() => interlock.ReleaseBleeder(Grants.Revoked(), _cancel));
        await interlock.MakeSafe(_cancel);
        await interlock.SetWatchdog(TimeSpan.FromMilliseconds(500), _cancel);
        await interlock.SetWatchdog(null, _cancel);

        Assert.Equal(
            ["OUTPut:STATe 0", "OUTPut:STATe 1", "SYSTem:WATChdog:TIMe 0.5", "SYSTem:WATChdog:TIMe 0"],
            instrument.Received.SkipWhile(l => l != "*CLS").Skip(1).Where(l => !l.Contains('?')));
    }

    [Theory]
    [InlineData("1,0,1")]
    [InlineData("1,0,1,0,0")]
    [InlineData("1,0,2,0")]
    [InlineData("1,0,,0")]
    public async Task What_is_not_four_flags_is_no_state(string reply)
    {
        await using var instrument = ScriptedRoles.Interlock();
        using var interlock = await ScpiInterlock.Connect(To(instrument, "interlock"), _cancel);
        instrument.Once("SENSe:DATA?", v => v.Line(reply));
        await Assert.ThrowsAsync<LinkException>(() => interlock.Read(_cancel));
    }

    [Fact]
    public async Task A_relay_that_does_not_follow_is_said()
    {
        await using var instrument = ScriptedRoles.Interlock();
        using var interlock = await ScpiInterlock.Connect(To(instrument, "interlock"), _cancel);
        instrument.On("OUTPut:STATe?", "0");
        await Assert.ThrowsAsync<InstrumentException>(() => interlock.EngageBleeder(_cancel));
    }

    [Fact]
    public async Task The_hotplate_heats_says_its_temperature_and_switches_off()
    {
        await using var instrument = ScriptedRoles.Hotplate();
        using var plate = await ScpiHotplate.Connect(To(instrument, "hotplate"), _cancel);

        await plate.Heat(125, _cancel);
        Assert.Equal(124.7, await plate.Read(_cancel), 1e-12);
        await plate.MakeSafe(_cancel);

        Assert.Equal(
            ["SOURce:TEMPerature:SPOint 125", "OUTPut:STATe 1", "OUTPut:STATe 0"],
            instrument.Received.SkipWhile(l => l != "*CLS").Skip(1).Where(l => !l.Contains('?')));
    }

    [Fact]
    public async Task A_temperature_that_the_plate_clips_is_refused_before_it_heats()
    {
        await using var instrument = ScriptedRoles.Hotplate();
        using var plate = await ScpiHotplate.Connect(To(instrument, "hotplate"), _cancel);
        instrument.Keep("SOURce:TEMPerature:SPOint", "SOURce:TEMPerature:SPOint?", "20", _ => "100");

        var e = await Assert.ThrowsAsync<InstrumentException>(() => plate.Heat(125, _cancel));
        Assert.Contains("125 was taken as 100", e.Message, StringComparison.Ordinal);
        await Assert.ThrowsAsync<ArgumentOutOfRangeException>(() => plate.Heat(double.NaN, _cancel));
        Assert.Equal(0, instrument.Count("OUTPut:STATe 1"));
    }

    [Fact]
    public async Task A_heating_that_does_not_follow_is_said()
    {
        await using var instrument = ScriptedRoles.Hotplate();
        using var plate = await ScpiHotplate.Connect(To(instrument, "hotplate"), _cancel);
        instrument.On("OUTPut:STATe?", "0");
        await Assert.ThrowsAsync<InstrumentException>(() => plate.Heat(60, _cancel));
        instrument.On("OUTPut:STATe?", "1");
        await Assert.ThrowsAsync<InstrumentException>(() => plate.MakeSafe(_cancel));
    }

    [Theory]
    [InlineData("supply")]
    [InlineData("pulser")]
    [InlineData("scope")]
    [InlineData("interlock")]
    [InlineData("hotplate")]
    public async Task An_instrument_of_another_kind_is_refused_with_one_clear_message(string role)
    {
        await using var instrument = ScriptedRoles.Voltmeter();
        var to = To(instrument, role);
        var e = await Assert.ThrowsAsync<InstrumentException>(async () => (role switch
        {
            "supply" => (IDisposable)await ScpiSupply.Connect(to, _cancel),
            "pulser" => await ScpiPulser.Connect(to, _cancel),
            "scope" => await ScpiScope.Connect(to, _cancel),
            "hotplate" => await ScpiHotplate.Connect(to, _cancel),
            _ => await ScpiInterlock.Connect(to, _cancel),
        }).Dispose());

        Assert.Contains($"'MAKER,VOLTMETER,1,1.0' is no {role}", e.Message, StringComparison.Ordinal);
        Assert.Contains(instrument.Address.ToString(), e.Message, StringComparison.Ordinal);
        Assert.Contains("-113", e.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task An_identity_that_the_dialect_is_not_for_is_refused_before_anything_is_set()
    {
        await using var instrument = ScriptedRoles.Supply();
        var e = await Assert.ThrowsAsync<InstrumentException>(() =>
            ScpiSupply.Connect(To(instrument, "supply", "^MAKER,OTHER,"), _cancel));
        Assert.Contains("MAKER,SUPPLY,1,1.0", e.Message, StringComparison.Ordinal);
        using var right = await ScpiSupply.Connect(To(instrument, "supply", "^MAKER,SUPPLY,"), _cancel);
    }

    [Fact]
    public async Task A_dialect_that_lacks_an_operation_is_refused_by_name_before_connecting()
    {
        await using var instrument = ScriptedRoles.Supply();
        var whole = To(instrument, "supply");
        var lacking = whole.Dialect.Commands.Where(c => c.Key != "output-off").ToDictionary();
        var e = await Assert.ThrowsAsync<InstrumentException>(() =>
            ScpiSupply.Connect(whole with { Dialect = whole.Dialect with { Commands = lacking } }, _cancel));
        Assert.Contains("output-off", e.Message, StringComparison.Ordinal);
        Assert.Equal(0, instrument.Visits);
    }

    [Theory]
    [InlineData("*IDN?\n", "echo")]
    [InlineData("MAKER\n", "identity")]
    [InlineData("\n", "empty")]
    public async Task What_answers_no_identity_is_refused(string reply, string named)
    {
        await using var instrument = ScriptedRoles.Supply();
        instrument.On("*IDN?", v => v.Raw(reply));
        var e = await Assert.ThrowsAsync<LinkException>(() => ScpiSupply.Connect(To(instrument, "supply"), _cancel));
        Assert.Contains(named, e.Message, StringComparison.Ordinal);
    }
}
