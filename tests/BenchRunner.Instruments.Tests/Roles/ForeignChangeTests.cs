using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Tests.Scripts;
using BenchRunner.Signals.Traces;
using BenchRunner.Signals.Units;

namespace BenchRunner.Instruments.Tests.Roles;

/// <summary>Another controller changes a setting over a connection of its own: the next read-back names setting, found
/// and set, and nothing is put right.</summary>
public sealed class ForeignChangeTests
{
    private static readonly TrainSettings Train =
        new(new Seconds(5e-6), new Seconds(2e-6), new Seconds(1e-6), new Volts(15), new Volts(-4));

    private readonly CancellationToken _cancel = TestContext.Current.CancellationToken;

    [Theory]
    [InlineData("SOURce:VOLTage:PROTection:LEVel", "900", "the over-voltage protection is 900 V where 440 V was set")]
    [InlineData("SOURce:CURRent:LEVel:IMMediate:AMPLitude", "2", "the current limit is 2 A where 0.5 A was set")]
    [InlineData("SOURce:VOLTage:LEVel:IMMediate:AMPLitude", "410", "the voltage is 410 V where 400 V was set")]
    [InlineData("OUTPut:STATe", "0", "the output is off where on was set")]
    public async Task A_supply_says_what_is_not_as_it_was_set_and_programs_nothing_over_it(
        string setting, string value, string says)
    {
        await using ScriptedInstrument script = ScriptedRoles.Supply();
        using ScpiSupply supply = await ScpiSupply.Connect(
            ScriptedRoles.To(script, "supply", TimeProvider.System, new Recorder()), _cancel);
        await supply.CheckSettings(_cancel);
        await Program(supply, 400);
        await supply.OutputOn(Grants.Live(), _cancel);
        await supply.CheckSettings(_cancel);
        await Foreign(script, $"{setting} {value}");
        int sent = Sets(script);

        foreach (Func<Task> what in (Func<Task>[])[() => supply.CheckSettings(_cancel), () => Program(supply, 300)])
        {
            var e = await Assert.ThrowsAsync<SettingChangedException>(what);
            Assert.Contains(says, e.Message, StringComparison.Ordinal);
        }

        Assert.Equal(sent, Sets(script));
    }

    [Fact]
    public async Task A_supply_that_safety_set_down_over_its_own_connection_is_not_foreign()
    {
        await using ScriptedInstrument script = ScriptedRoles.Supply();
        using ScpiSupply supply = await ScpiSupply.Connect(
            ScriptedRoles.To(script, "supply", TimeProvider.System, new Recorder()), _cancel);
        using ScpiSupply safety = await ScpiSupply.Connect(
            ScriptedRoles.To(script, "supply", TimeProvider.System, new Recorder()), _cancel);
        await Program(supply, 400);
        await supply.OutputOn(Grants.Live(), _cancel);
        await safety.MakeSafe(_cancel);

        await supply.CheckSettings(_cancel);
        await Program(supply, 300);
    }

    [Theory]
    [InlineData("SOURce:PULSe1:WIDTh", "9E-6", "the first width is 9E-06 s where 5E-06 s was set")]
    [InlineData("SOURce:PULSe2:DELay", "1E-6", "the gap is 1E-06 s where 2E-06 s was set")]
    [InlineData("SOURce:PULSe2:WIDTh", "2E-6", "the second width is 2E-06 s where 1E-06 s was set")]
    [InlineData("SOURce:VOLTage:LEVel:IMMediate:HIGH", "18", "the gate's on level is 18 V where 15 V was set")]
    [InlineData("SOURce:VOLTage:LEVel:IMMediate:LOW", "0", "the gate's off level is 0 V where -4 V was set")]
    public async Task A_pulser_says_what_is_not_as_it_was_set(string setting, string value, string says)
    {
        await using ScriptedInstrument script = ScriptedRoles.Pulser();
        using ScpiPulser pulser = await ScpiPulser.Connect(
            ScriptedRoles.To(script, "pulser", TimeProvider.System, new Recorder()), _cancel);
        await pulser.Program(Grants.Live(), Train, _cancel);
        await pulser.MakeSafe(_cancel);
        await pulser.CheckSettings(_cancel);
        await Foreign(script, $"{setting} {value}");
        int sent = Sets(script);

        var e = await Assert.ThrowsAsync<SettingChangedException>(
            () => pulser.Program(Grants.Live(), Train, _cancel));

        Assert.Contains(says, e.Message, StringComparison.Ordinal);
        Assert.Equal(sent, Sets(script));
    }

    [Theory]
    [InlineData("INPut1:ATTenuation", "100")]
    [InlineData("SENSe:VOLTage2:DC:RANGe:UPPer", "5")]
    [InlineData("SENSe:SWEep:OFFSet:TIME", "1E-3")]
    [InlineData("TRIGger:SEQuence:LEVel", "300")]
    public async Task A_scope_says_what_is_not_as_it_was_set(string setting, string value)
    {
        await using ScriptedInstrument script = ScriptedRoles.Scope();
        using ScpiScope scope = await ScpiScope.Connect(
            ScriptedRoles.To(script, "scope", TimeProvider.System, new Recorder()), _cancel);
        await scope.Configure(Settings(), _cancel);
        await scope.CheckSettings(_cancel);
        await Foreign(script, $"{setting} {value}");
        int sent = Sets(script);

        var e = await Assert.ThrowsAsync<SettingChangedException>(
            () => scope.Configure(Settings() with { TriggerLevel = 3 }, _cancel));

        Assert.Contains(setting, e.Message, StringComparison.Ordinal);
        Assert.Equal(sent, Sets(script));
    }

    private static ScopeSettings Settings() => new(
        new Seconds(1e-9), 100, new Seconds(1e-7), Channel.VgsLow, 5,
        [
            new ScopeChannelSettings(Channel.VgsLow, 1, 40, 0, 10),
            new ScopeChannelSettings(Channel.VdsLow, 2, 800, 200, 100),
        ]);

    private static int Sets(ScriptedInstrument script) =>
        script.Received.Count(line => line.Contains(' ', StringComparison.Ordinal) && !line.StartsWith('*'));

    private static Task Foreign(ScriptedInstrument script, string command) => script.Obey(command);

    private Task Program(ScpiSupply supply, double volts) => supply.Program(
        Grants.Live(), new Volts(volts), new Amperes(0.5), new Volts(volts * 1.1), _cancel);
}
