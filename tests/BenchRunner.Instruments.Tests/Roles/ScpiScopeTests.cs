using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Instruments.Tests.Scripts;
using BenchRunner.Signals.Traces;
using BenchRunner.Signals.Units;

namespace BenchRunner.Instruments.Tests.Roles;

public sealed class ScpiScopeTests : IAsyncLifetime
{
    private const int Points = 100;

    private static readonly ScopeSettings Settings = new(
        new Seconds(1e-9),
        Points,
        new Seconds(100e-9),
        Channel.VdsLow,
        400,
        [new(Channel.VdsLow, 1, 800, 350), new(Channel.IdLow, 2, 1600, 0)]);

    private readonly ScriptedInstrument _instrument = ScriptedRoles.Scope(Points);
    private readonly Clock _clock = new();
    private readonly Recorder _log = new();
    private readonly CancellationToken _cancel = TestContext.Current.CancellationToken;
    private ScpiScope _scope = null!;

    public async ValueTask InitializeAsync() =>
        _scope = await ScpiScope.Connect(ScriptedRoles.To(_instrument, "scope", _clock, _log), _cancel);

    public ValueTask DisposeAsync()
    {
        _scope.Dispose();
        return _instrument.DisposeAsync();
    }

    private int Sent => _instrument.Received.SkipWhile(l => l != "*CLS").Skip(1).Count(l => !l.Contains('?'));

    private string[] Discarded =>
        [.. _log.Events.Where(e => e.Kind == InstrumentEventKind.Discarded).Select(e => e.Message)];

    [Fact]
    public async Task A_record_holds_codes_scale_time_base_and_count()
    {
        await _scope.Configure(Settings, _cancel);
        await _scope.Arm(_cancel);
        _instrument.On("STATus:OPERation:CONDition?", "0");
        Assert.Equal(AcquisitionEnd.Complete, await _scope.WaitForRecord(TimeSpan.FromSeconds(1), _cancel));
        var record = await _scope.Read(_cancel);

        Assert.Equal(7, record.Count);
        Assert.Equal([Channel.VdsLow, Channel.IdLow], record.Traces.Select(t => t.Channel));
        var trace = record.Traces[1];
        Assert.Equal(ScriptedRoles.Codes(Points, 2), trace.Codes);

        // xorigin -100 ns, xreference 20, xincrement 1 ns: the first sample lies at -120 ns.
        Assert.Equal(-120e-9, trace.TimeOrigin, 1e-18);
        Assert.Equal(1e-9, trace.SampleInterval);
        Assert.Equal(1600, trace.FullScale, 1e-9);
        Assert.Equal(
            (50.0, 100.0, (short)-2048, (short)2047), (trace.Origin, trace.Reference, trace.LowRail, trace.HighRail));
    }

    [Fact]
    public async Task Settings_that_stand_are_not_sent_again()
    {
        await _scope.Configure(Settings, _cancel);
        var first = Sent;
        await _scope.Configure(Settings, _cancel);
        Assert.Equal(first, Sent);
        await _scope.Configure(Settings with { TriggerLevel = 300 }, _cancel);
        Assert.Equal(first + 1, Sent);
    }

    [Fact]
    public async Task After_a_new_connection_everything_is_sent_again()
    {
        await _scope.Configure(Settings, _cancel);
        var first = Sent;
        _instrument.Once("STATus:OPERation:CONDition?", v => v.HangUp());
        await Assert.ThrowsAsync<Instruments.Links.LinkException>(
            () => _scope.WaitForRecord(TimeSpan.FromSeconds(1), _cancel));
        await _scope.Abort(_cancel);
        await _scope.Configure(Settings, _cancel);
        Assert.Equal(2 * first, Sent - 1);
    }

    [Theory]
    [InlineData("SENSe:VOLTage2:DC:RANGe:UPPer?", "1700")]
    [InlineData("SENSe:SWEep:POINts?", "99")]
    [InlineData("SENSe:SWEep:TINTerval?", "2E-9")]
    [InlineData("FORMat:DATA?", "INT,8")]
    [InlineData("FORMat:BORDer?", "NORM")]
    [InlineData("TRIGger:SEQuence:SOURce?", "INT2")]
    [InlineData("TRIGger:SEQuence:LEVel?", "200")]
    public async Task A_setting_that_reads_back_otherwise_is_refused_and_sent_again_next_time(
        string query, string answer)
    {
        _instrument.Once(query, v => v.Line(answer));
        await Assert.ThrowsAsync<InstrumentException>(() => _scope.Configure(Settings, _cancel));
        await Assert.ThrowsAsync<InvalidOperationException>(() => _scope.Read(_cancel));
        await _scope.Configure(Settings, _cancel);
    }

    [Fact]
    public async Task A_missed_trigger_is_aborted_at_its_deadline()
    {
        await _scope.Configure(Settings, _cancel);
        await _scope.Arm(_cancel);
        int before = _instrument.Count("ABORt");
        var wait = _scope.WaitForRecord(TimeSpan.FromMilliseconds(50), _cancel);
        await _clock.PassUntil(TimeSpan.FromMilliseconds(5), () => wait.IsCompleted);

        Assert.Equal(AcquisitionEnd.NotTriggered, await wait);
        Assert.Equal(before + 1, _instrument.Count("ABORt"));
    }

    [Fact]
    public async Task What_another_run_left_armed_is_aborted_once_before_the_first_setting()
    {
        await _scope.Configure(Settings, _cancel);
        await _scope.Configure(Settings, _cancel);

        Assert.Equal(1, _instrument.Count("ABORt"));
    }

    [Fact]
    public async Task A_scope_that_does_not_arm_is_said_within_bounds()
    {
        _instrument.On("INITiate:IMMediate", _ => Task.CompletedTask);
        var arm = _scope.Arm(_cancel);
        await _clock.PassUntil(TimeSpan.FromMinutes(10), () => arm.IsCompleted);
        await Assert.ThrowsAsync<InstrumentException>(() => arm);
    }

    [Theory]
    [InlineData(99, 7, 1e-9, "samples")]
    [InlineData(Points, 6, 1e-9, "acquisition 6")]
    [InlineData(Points, 7, 2e-9, "interval")]
    public async Task A_trace_of_another_length_acquisition_or_scale_is_left_out(
        int points, int count, double interval, string named)
    {
        await _scope.Configure(Settings, _cancel);
        _instrument.On("TRACe:PREamble? INTernal1", ScriptedRoles.Preamble(points, 1, count, interval));

        var record = await _scope.Read(_cancel);

        Assert.Equal([Channel.IdLow], record.Traces.Select(t => t.Channel));
        Assert.Contains(named, Assert.Single(Discarded), StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_trace_with_the_scale_of_another_range_is_left_out()
    {
        await _scope.Configure(Settings, _cancel);
        _instrument.On("TRACe:PREamble? INTernal1", ScriptedRoles.Preamble(Points, 2));
        Assert.Equal([Channel.IdLow], (await _scope.Read(_cancel)).Traces.Select(t => t.Channel));
    }

    [Fact]
    public async Task A_count_that_moved_while_reading_is_no_count()
    {
        await _scope.Configure(Settings, _cancel);
        _instrument.Once("TRACe:DATA? INTernal2", async v =>
        {
            _instrument.On("SENSe:SWEep:COUNt:ACTual?", "8");
            await v.Raw(ScriptedRoles.Block(ScriptedRoles.Codes(Points, 2)));
        });
        Assert.Null((await _scope.Read(_cancel)).Count);
    }

    [Fact]
    public async Task A_block_cut_by_a_lost_link_is_left_out_and_the_next_record_comes_whole()
    {
        await _scope.Configure(Settings, _cancel);
        _instrument.Once("TRACe:DATA? INTernal1", async v =>
        {
            await v.Raw(ScriptedRoles.Block(ScriptedRoles.Codes(Points, 1)).AsMemory(0, 77));
            await v.HangUp();
        });

        var cut = await _scope.Read(_cancel);
        Assert.DoesNotContain(cut.Traces, t => t.Channel == Channel.VdsLow);
        Assert.Null(cut.Count);

        await _scope.Configure(Settings, _cancel);
        var whole = await _scope.Read(_cancel);
        Assert.Equal((2, 7), (whole.Traces.Count, whole.Count));
    }
}
