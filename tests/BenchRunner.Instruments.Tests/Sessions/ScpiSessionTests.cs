using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Instruments.Tests.Scripts;

namespace BenchRunner.Instruments.Tests.Sessions;

public class ScpiSessionTests
{
    // Long enough that a busy machine never misses it where a reply is meant to come; the tests that want a time-out use Brief.
    private static readonly SessionOptions Patient = new() { ReplyWithin = TimeSpan.FromSeconds(20), ConnectWithin = TimeSpan.FromSeconds(20) };
    private readonly CancellationToken _cancel = TestContext.Current.CancellationToken;
    private readonly Recorder _log = new();

    private Task<ScpiSession> Open(ScriptedInstrument instrument, SessionOptions? options = null) =>
        ScpiSession.Open("supply", instrument.Address, options ?? Patient, TimeProvider.System, _log, _cancel);

    [Fact]
    public async Task A_question_is_answered_and_a_setting_checked_in_the_error_queue()
    {
        await using var instrument = new ScriptedInstrument();
        instrument.Keep("VOLT", "VOLT?", "0");
        using var session = await Open(instrument);

        await session.Set("VOLT 48", _cancel);

        Assert.Equal(48, await session.Ask("VOLT?", ReplyNumber.Parse, _cancel));
        Assert.Equal("MAKER", session.Identity.Maker);
        Assert.Equal("SYSTem:ERRor?", instrument.Received[Array.IndexOf(instrument.Received, "VOLT 48") + 1]);
    }

    [Fact]
    public async Task Errors_that_were_there_at_the_start_are_logged_and_not_blamed_on_our_command()
    {
        await using var instrument = new ScriptedInstrument();
        instrument.On("X", _ => Task.CompletedTask);
        instrument.Fail("-222,\"Data out of range\"");
        instrument.Fail("-350,\"Queue overflow\"");
        using var session = await Open(instrument);

        await session.Set("X", _cancel);

        Assert.Equal(2, _log.Events.Count(e => e.Kind == InstrumentEventKind.Errors));
        Assert.Contains("*CLS", instrument.Received);
    }

    [Fact]
    public async Task A_refused_setting_names_every_entry_of_the_queue()
    {
        await using var instrument = new ScriptedInstrument();
        instrument.On("VOLT 2000", _ => ScriptedInstrument.Done(() =>
        {
            instrument.Fail("-222,\"Data out of range;VOLT 2000\"");
            instrument.Fail("-350,\"Queue overflow\"");
        }));
        using var session = await Open(instrument);

        var e = await Assert.ThrowsAsync<InstrumentException>(() => session.Set("VOLT 2000", _cancel));

        Assert.Contains("-222 Data out of range; VOLT 2000", e.Message, StringComparison.Ordinal);
        Assert.Contains("unknown", e.Message, StringComparison.Ordinal);
        Assert.Equal("supply", e.Role);
    }

    [Fact]
    public async Task A_late_reply_never_answers_the_next_question()
    {
        await using var instrument = new ScriptedInstrument();
        instrument.On("B?", "2");
        using var session = await Open(instrument, Brief);

        // The reply to A? comes at the worst moment: just before the answer to the first question of the resynchronisation.
        instrument.Once("A?", _ => Task.CompletedTask);
        instrument.Once("*ESE 101;*ESE?", async v =>
        {
            await v.Line("1");
            await v.Line("101");
        });
        await Assert.ThrowsAsync<LinkException>(async () => await session.Ask("A?", ReplyNumber.Parse, _cancel));

        Assert.Equal(2, await session.Ask("B?", ReplyNumber.Parse, _cancel));
        Assert.True(_log.Has(InstrumentEventKind.Resynchronised));
        Assert.Equal(1, instrument.Visits);
    }

    [Fact]
    public async Task A_late_reply_that_happens_to_be_the_number_asked_for_is_told_apart()
    {
        await using var instrument = new ScriptedInstrument();
        instrument.On("B?", "2");
        using var session = await Open(instrument, Brief);

        instrument.Once("A?", _ => Task.CompletedTask);
        instrument.Once("*ESE 101;*ESE?", async v =>
        {
            await v.Line("101");
            await v.Line("101");
        });
        await Assert.ThrowsAsync<LinkException>(async () => await session.Ask("A?", ReplyNumber.Parse, _cancel));

        Assert.Equal(2, await session.Ask("B?", ReplyNumber.Parse, _cancel));
    }

    private static SessionOptions Brief => Patient with
    {
        ReplyWithin = TimeSpan.FromMilliseconds(400),
        Silence = TimeSpan.FromMilliseconds(20),
        ReadAttempts = 1,
    };
}
