using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Tests.Scripts;
using BenchRunner.Signals.Traces;
using BenchRunner.Signals.Units;

namespace BenchRunner.Instruments.Tests.Roles;

/// <summary>What the scope is told of its probes, and what it must still say before each capture.</summary>
public sealed class ScopeProbesTests : IAsyncLifetime
{
    private const int Points = 100;

    private static readonly ScopeSettings Settings = new(
        new Seconds(1e-9),
        Points,
        new Seconds(100e-9),
        Channel.VdsLow,
        400,
        [new(Channel.VdsLow, 1, 800, 350, 100), new(Channel.IdLow, 2, 1600, 0)]);

    private readonly ScriptedInstrument _instrument = ScriptedRoles.Scope(Points);
    private readonly CancellationToken _cancel = TestContext.Current.CancellationToken;
    private ScpiScope _scope = null!;

    public async ValueTask InitializeAsync() => _scope = await Connect();

    public ValueTask DisposeAsync()
    {
        _scope.Dispose();
        return _instrument.DisposeAsync();
    }

    [Fact]
    public async Task An_attenuation_is_set_before_its_range_and_asked_back()
    {
        await _scope.Configure(Settings, _cancel);

        Assert.True(At("INPut1:ATTenuation 100") is >= 0 and var set && set < At("SENSe:VOLTage1:DC:RANGe:UPPer 800"));
        Assert.Equal(1, _instrument.Count("INPut1:ATTenuation?"));
    }

    [Fact]
    public async Task Each_arming_asks_once_for_each_stated_attenuation()
    {
        await _scope.Configure(Settings, _cancel);
        await _scope.Arm(_cancel);
        await _scope.Abort(_cancel);
        await _scope.Arm(_cancel);
        Assert.Equal(3, _instrument.Count("INPut1:ATTenuation?"));
    }

    [Fact]
    public async Task Where_none_is_stated_nothing_is_sent_or_asked()
    {
        await _scope.Configure(Settings with { Channels = [.. Settings.Channels.Select(Unstated)] }, _cancel);
        await _scope.Arm(_cancel);
        Assert.DoesNotContain(_instrument.Received, l => l.Contains("ATT", StringComparison.Ordinal));
    }

    [Theory]
    [InlineData("10")]
    [InlineData("98.9")]
    [InlineData("101.1")]
    public async Task An_attenuation_that_changed_is_said_and_nothing_is_armed(string now)
    {
        await _scope.Configure(Settings, _cancel);
        _instrument.On("INPut1:ATTenuation?", now);

        var e = await Assert.ThrowsAsync<SettingChangedException>(() => _scope.Arm(_cancel));

        Assert.Equal("scope", e.Role);
        Assert.Contains(
            $"attenuation of vds_low (input 1) is {now} where 100 was set", e.Message, StringComparison.Ordinal);
        Assert.Equal(0, _instrument.Count("INITiate:IMMediate"));
    }

    [Fact]
    public async Task After_a_change_was_said_the_next_configuration_sends_everything_anew()
    {
        int Sent() => _instrument.Received.Count(l => l.StartsWith("INPut1:ATTenuation 1", StringComparison.Ordinal));
        await _scope.Configure(Settings, _cancel);
        await _scope.Configure(Settings, _cancel);
        Assert.Equal(1, Sent());
        _instrument.On("INPut1:ATTenuation?", "10");
        await Assert.ThrowsAsync<SettingChangedException>(() => _scope.Arm(_cancel));

        _instrument.On("INPut1:ATTenuation?", "100");
        await _scope.Configure(Settings, _cancel);
        await _scope.Arm(_cancel);

        Assert.Equal(2, Sent());
    }

    [Fact]
    public async Task An_attenuation_that_is_not_taken_is_refused()
    {
        _instrument.Keep("INPut1:ATTenuation", "INPut1:ATTenuation?", "1", _ => "1");
        var e = await Assert.ThrowsAsync<InstrumentException>(() => _scope.Configure(Settings, _cancel));
        Assert.Contains("'INPut1:ATTenuation 100' was taken as 1", e.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task An_armed_scope_is_triggered_without_a_train()
    {
        await _scope.Configure(Settings, _cancel);
        await _scope.Arm(_cancel);
        await _scope.Trigger(_cancel);
        Assert.Equal(AcquisitionEnd.Complete, await _scope.WaitForRecord(TimeSpan.FromSeconds(1), _cancel));
        Assert.Equal(2, (await _scope.Read(_cancel)).Traces.Count);
    }

    [Fact]
    public async Task A_clamp_is_degaussed_where_the_dialect_can()
    {
        Assert.True(_scope.CanDegauss);
        await _scope.Degauss(2, _cancel);
        Assert.Equal(1, _instrument.Count("INPut2:DEGauss"));
    }

    [Fact]
    public async Task A_dialect_without_it_leaves_it_to_a_person()
    {
        using var plain = await Connect("degauss");
        Assert.False(plain.CanDegauss);
        await Assert.ThrowsAsync<InvalidOperationException>(() => plain.Degauss(2, _cancel));
        Assert.Equal(0, _instrument.Count("INPut2:DEGauss"));
    }

    private static ScopeChannelSettings Unstated(ScopeChannelSettings channel) => channel with { Attenuation = null };

    private int At(string line) => Array.IndexOf(_instrument.Received, line);

    private Task<ScpiScope> Connect(string without = "")
    {
        var to = ScriptedRoles.To(_instrument, "scope", new Clock(), new Recorder());
        var commands = to.Dialect.Commands.Where(c => c.Key != without).ToDictionary();
        return ScpiScope.Connect(to with { Dialect = to.Dialect with { Commands = commands } }, _cancel);
    }
}
