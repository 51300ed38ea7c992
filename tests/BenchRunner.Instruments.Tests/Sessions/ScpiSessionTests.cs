using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Instruments.Tests.Scripts;

namespace BenchRunner.Instruments.Tests.Sessions;

public class ScpiSessionTests : SessionFixture
{
    [Fact]
    public async Task A_question_is_answered_and_a_setting_checked_in_the_error_queue()
    {
        using var session = await Open();

        await session.Set("VOLT 48", Cancel);

        Assert.Equal(48, await Ask(session, "VOLT?"));
        Assert.Equal("MAKER", session.Identity.Maker);
        Assert.Equal("SYSTem:ERRor?", Instrument.Received[Array.IndexOf(Instrument.Received, "VOLT 48") + 1]);
    }

    [Fact]
    public async Task Errors_that_were_there_at_the_start_are_logged_and_not_blamed_on_our_command()
    {
        Instrument.Fail("-222,\"Data out of range\"");
        Instrument.Fail("-350,\"Queue overflow\"");
        using var session = await Open();

        await session.Set("VOLT 1", Cancel);

        Assert.Equal(2, Log.Events.Count(e => e.Kind == InstrumentEventKind.Errors));
        Assert.Contains("*CLS", Instrument.Received);
    }

    [Fact]
    public async Task A_refused_setting_names_every_entry_of_the_queue()
    {
        Instrument.On("VOLT 2000", _ => ScriptedInstrument.Done(() =>
        {
            Instrument.Fail("-222,\"Data out of range;VOLT 2000\"");
            Instrument.Fail("-350,\"Queue overflow\"");
        }));
        using var session = await Open();

        var e = await Assert.ThrowsAsync<InstrumentException>(() => session.Set("VOLT 2000", Cancel));

        Assert.Contains("-222 Data out of range; VOLT 2000", e.Message, StringComparison.Ordinal);
        Assert.Contains("unknown", e.Message, StringComparison.Ordinal);
        Assert.Equal("supply", e.Role);
    }

    [Fact]
    public async Task An_error_queue_that_never_gets_empty_is_given_up()
    {
        using var session = await Open();
        Instrument.On("SYSTem:ERRor?", "-100,\"Command error\"");

        await Assert.ThrowsAsync<LinkException>(() => session.Set("VOLT 1", Cancel));

        Assert.InRange(Instrument.Count("SYSTem:ERRor?"), 64, 70);
    }

    [Fact]
    public async Task Callers_that_ask_at_once_get_their_own_answers()
    {
        for (var i = 0; i < 20; i++)
        {
            Instrument.On($"N{i}?", $"{i}");
        }

        using var session = await Open();

        var answers = await Task.WhenAll(Enumerable.Range(0, 20).Select(i => Ask(session, $"N{i}?")));

        Assert.Equal(Enumerable.Range(0, 20).Select(i => (double)i), answers);
    }

    [Fact]
    public async Task A_command_that_sets_down_does_not_wait_for_an_outstanding_reply()
    {
        using var session = await Open();
        Visitor? waiting = null;
        Instrument.Once("B?", v => ScriptedInstrument.Done(() => waiting = v));
        Instrument.On("OFF", _ => waiting!.Line("7"));

        var answer = Ask(session, "B?");
        await Clock.Until(() => Instrument.Count("B?") == 1);
        session.SendNow("OFF");

        Assert.Equal(7, await answer);
    }

    [Fact]
    public async Task Setting_down_is_sent_again_over_a_new_connection()
    {
        using var session = await Open();
        Instrument.On("OFF", v => v.Visit == 1 ? v.HangUp() : Task.CompletedTask);

        await session.SetDown(["OFF"], Cancel);

        Assert.Equal((2, 2), (Instrument.Count("OFF"), Instrument.Visits));
        Assert.True(Log.Has(InstrumentEventKind.Reconnected));
    }

    [Theory]
    [InlineData("VOLT 1\nOUTP 1")]
    [InlineData("VOLT 1\u0007")]
    [InlineData("VOLT µ")]
    [InlineData("")]
    public async Task A_message_of_more_than_one_line_of_ascii_is_refused(string message)
    {
        using var session = await Open();
        await Assert.ThrowsAsync<ArgumentException>(() => session.Set(message, Cancel));
        Assert.Equal(2, await Ask(session, "B?"));
    }

    [Fact]
    public async Task An_address_where_nothing_listens_is_tried_as_often_as_said_and_named()
    {
        var address = Instrument.Address;
        await Instrument.DisposeAsync();
        var open = ScpiSession.Open("supply", address, Options with { ConnectAttempts = 3 }, Time, Log, Cancel);
        await Time.PassUntil(TimeSpan.FromMilliseconds(50), () => open.IsCompleted);

        var e = await Assert.ThrowsAsync<LinkException>(() => open);
        Assert.StartsWith(address.ToString(), e.Message, StringComparison.Ordinal);
    }
}
