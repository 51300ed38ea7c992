using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Tests.Scripts;

namespace BenchRunner.Instruments.Tests.Roles;

public sealed class ScpiPulserTests : IAsyncLifetime
{
    private const string FireCommand = "TRIGger:SEQuence:IMMediate";
    private const string CountQuery = "SOURce:PULSe:COUNt?";

    private static readonly TrainSettings Train = new(new(8.123e-6), new(6e-6), new(3e-6), new(18), new(-4));

    private readonly ScriptedInstrument _instrument = ScriptedRoles.Pulser();
    private readonly Clock _clock = new();
    private readonly Recorder _log = new();
    private readonly CancellationToken _cancel = TestContext.Current.CancellationToken;
    private ScpiPulser _pulser = null!;

    public async ValueTask InitializeAsync() =>
        _pulser = await ScpiPulser.Connect(ScriptedRoles.To(_instrument, "pulser", _clock, _log), _cancel);

    public ValueTask DisposeAsync()
    {
        _pulser.Dispose();
        return _instrument.DisposeAsync();
    }

    private async Task ProgramAndArm()
    {
        await _pulser.Program(Grants.Live(), Train, _cancel);
        await _pulser.Arm(Grants.Live(), _cancel);
    }

    private async Task<T> Passing<T>(Task<T> task)
    {
        await _clock.PassUntil(TimeSpan.FromSeconds(1), () => task.IsCompleted);
        return await task;
    }

    [Fact]
    public async Task A_train_is_programmed_armed_and_fired_once()
    {
        Assert.Equal(Train, await _pulser.Program(Grants.Live(), Train, _cancel));
        await _pulser.Arm(Grants.Live(), _cancel);
        await _pulser.Fire(Grants.Live(), _cancel);

        Assert.Equal(42, await _pulser.ReadCount(_cancel));
        Assert.Equal(1, _instrument.Count(FireCommand));
        Assert.Contains("SOURce:PULSe1:WIDTh 8.123E-06", _instrument.Received);
    }

    [Fact]
    public async Task A_train_beyond_the_permit_is_not_written()
    {
        foreach (var beyond in new[]
        {
            Train with { First = new(21e-6) }, Train with { Second = new(21e-6) },
            Train with { First = new(double.NaN) },
            Train with { GateOn = new(19) }, Train with { GateOff = new(-6) },
        })
        {
            await Assert.ThrowsAsync<PermitException>(() => _pulser.Program(Grants.Live(), beyond, _cancel));
        }

        await Assert.ThrowsAnyAsync<ArgumentException>(() =>
            _pulser.Program(Grants.Live(), Train with { Gap = new(-1e-6) }, _cancel));
        Assert.DoesNotContain(
            _instrument.Received, l => l.StartsWith("SOURce:", StringComparison.Ordinal) && !l.Contains('?'));
    }

    [Fact]
    public async Task A_width_that_somebody_else_changed_is_seen_before_arming()
    {
        await _pulser.Program(Grants.Live(), Train, _cancel);
        _instrument.On("SOURce:PULSe1:WIDTh?", "1.9E-05");

        await Assert.ThrowsAsync<InstrumentException>(() => _pulser.Arm(Grants.Live(), _cancel));

        Assert.DoesNotContain("INITiate:IMMediate", _instrument.Received);
    }

    [Fact]
    public async Task A_pulser_that_does_not_wait_for_its_trigger_is_not_fired()
    {
        _instrument.On("INITiate:IMMediate", _ => Task.CompletedTask);
        await _pulser.Program(Grants.Live(), Train, _cancel);

        await Assert.ThrowsAsync<InstrumentException>(() => _pulser.Arm(Grants.Live(), _cancel));
        await Assert.ThrowsAsync<InvalidOperationException>(() => _pulser.Fire(Grants.Live(), _cancel));

        Assert.DoesNotContain(FireCommand, _instrument.Received);
    }

    [Fact]
    public async Task One_arming_is_good_for_one_train()
    {
        await ProgramAndArm();
        await _pulser.Fire(Grants.Live(), _cancel);
        await Assert.ThrowsAsync<InvalidOperationException>(() => _pulser.Fire(Grants.Live(), _cancel));
        Assert.Equal(1, _instrument.Count(FireCommand));
    }

    [Fact]
    public async Task With_a_dead_permit_nothing_is_fired()
    {
        await ProgramAndArm();
        await Assert.ThrowsAsync<PermitException>(() => _pulser.Fire(Grants.Revoked(), _cancel));
        await Assert.ThrowsAsync<ArgumentNullException>(() => _pulser.Fire(null!, _cancel));
        await _pulser.ReadCount(_cancel);
        Assert.DoesNotContain(FireCommand, _instrument.Received);
    }

    [Fact]
    public async Task A_train_whose_reply_was_lost_is_found_out_and_never_fired_again()
    {
        await ProgramAndArm();
        _instrument.Once("SYSTem:ERRor?", v => v.Raw("garbage\n"));

        await Passing(Done(_pulser.Fire(Grants.Live(), _cancel)));

        Assert.Equal(1, _instrument.Count(FireCommand));
        Assert.Contains(_log.Events, e => e.Message.Contains("one train was fired", StringComparison.Ordinal));
    }

    [Fact]
    public async Task A_command_that_never_arrived_is_not_sent_again()
    {
        await ProgramAndArm();
        _instrument.Once(FireCommand, v => v.HangUp());

        var e = await Assert.ThrowsAsync<LinkException>(() => _pulser.Fire(Grants.Live(), _cancel));

        Assert.Contains("0 trains were fired", e.Message, StringComparison.Ordinal);
        Assert.Equal(1, _instrument.Count(FireCommand));
    }

    [Fact]
    public async Task Two_trains_where_one_was_fired_are_said()
    {
        await ProgramAndArm();
        _instrument.On(CountQuery, "43");
        var e = await Assert.ThrowsAsync<InstrumentException>(() => _pulser.Fire(Grants.Live(), _cancel));
        Assert.Contains("2 trains", e.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_train_that_is_not_counted_is_said_within_bounds()
    {
        await ProgramAndArm();
        _instrument.On(CountQuery, "41");
        await Assert.ThrowsAsync<InstrumentException>(() => Passing(Done(_pulser.Fire(Grants.Live(), _cancel))));
    }

    [Fact]
    public async Task The_safe_side_inhibits_at_once_and_takes_the_off_bias_away_only_when_told()
    {
        await ProgramAndArm();
        await _pulser.MakeSafe(_cancel);
        Assert.Equal("ABORt", _instrument.Received.Last(l => !l.Contains('?')));
        Assert.DoesNotContain("OUTPut:STATe 0", _instrument.Received);
        await _pulser.TakeOffBiasAway(_cancel);
        Assert.Equal("OUTPut:STATe 0", _instrument.Received.Last(l => !l.Contains('?')));
        await Assert.ThrowsAsync<InvalidOperationException>(() => _pulser.Fire(Grants.Live(), _cancel));
    }

    private static async Task<bool> Done(Task task)
    {
        await task;
        return true;
    }
}
