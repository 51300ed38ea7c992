using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Instruments.Tests.Scripts;

namespace BenchRunner.Instruments.Tests.Sessions;

/// <summary>Replies that are late, doubled, cut or nonsense: never the answer to the next question.</summary>
public class LostReplyTests : SessionFixture
{
    private const string FirstSentinel = "*ESE 101;*ESE?";

    [Theory]
    [InlineData("1")]
    [InlineData("101")] // happens to be the number that the resynchronisation asks for
    [InlineData("102")]
    public async Task A_late_reply_never_answers_the_next_question(string late)
    {
        using var session = await Open();
        Instrument.Once("A?", _ => Task.CompletedTask);

        // The reply comes at the worst moment: just before the answer to the first question of the resynchronisation.
        Instrument.Once(FirstSentinel, async v =>
        {
            await v.Line(late);
            await v.Line("101");
        });
        await LetTimeOut(Ask(session, "A?"), "A?");

        Assert.Equal(2, await AskB(session));
        Assert.True(Log.Has(InstrumentEventKind.Resynchronised));
        Assert.Equal(1, Instrument.Visits);
    }

    [Fact]
    public async Task A_cancelled_exchange_leaves_a_doubt_and_the_link_recovers()
    {
        using var session = await Open();
        using var cancel = new CancellationTokenSource();
        Instrument.Once("A?", _ => Task.CompletedTask);
        Instrument.Once(FirstSentinel, async v =>
        {
            await v.Line("1");
            await v.Line("101");
        });
        var asked = Ask(session, "A?", cancel.Token);
        await Clock.Until(() => Instrument.Count("A?") == 1);
        await cancel.CancelAsync();
        await Assert.ThrowsAnyAsync<OperationCanceledException>(() => asked);

        Assert.Equal(2, await AskB(session));
        Assert.Equal(1, Instrument.Visits);
    }

    [Fact]
    public async Task A_cancelled_resynchronisation_is_done_again()
    {
        using var session = await Open();
        using var cancel = new CancellationTokenSource();
        Instrument.Once("A?", _ => Task.CompletedTask);
        await LetTimeOut(Ask(session, "A?"), "A?");
        Instrument.Once(FirstSentinel, _ => Task.CompletedTask);
        var asked = Ask(session, "B?", cancel.Token);
        await Time.PassUntil(Options.Silence, () => Instrument.Count(FirstSentinel) == 1);
        await cancel.CancelAsync();
        await Assert.ThrowsAnyAsync<OperationCanceledException>(() => asked);

        Assert.Equal(2, await AskB(session));
    }

    [Fact]
    public async Task A_second_reply_to_one_question_is_dropped()
    {
        using var session = await Open();
        Instrument.Once("A?", v => v.Raw("1\n9\n"));

        Assert.Equal(1, await Ask(session, "A?"));
        Assert.Equal(2, await AskB(session));
        Assert.True(Log.Has(InstrumentEventKind.Doubt));
    }

    [Fact]
    public async Task A_carriage_return_after_the_newline_is_no_second_reply()
    {
        using var session = await Open();
        Instrument.On("A?", v => v.Raw("1\n\r"));

        Assert.Equal(1, await Ask(session, "A?"));
        Assert.Equal(1, await Ask(session, "A?"));
        Assert.Equal(2, await Ask(session, "B?"));
        Assert.False(Log.Has(InstrumentEventKind.Doubt));
    }

    [Fact]
    public async Task A_dripping_reply_does_not_put_its_deadline_off()
    {
        using var session = await Open();
        var dripped = new TaskCompletionSource(TaskCreationOptions.RunContinuationsAsynchronously);
        Instrument.Once("A?", async v =>
        {
            for (var i = 0; i < 10; i++)
            {
                await v.Raw("1");
                Time.Advance(Options.ReplyWithin / 5);
            }

            await v.Raw("\n");
            dripped.SetResult();
        });

        var e = await Assert.ThrowsAsync<LinkException>(() => Ask(session, "A?"));
        await dripped.Task;

        Assert.Contains("no whole reply to 'A?'", e.Message, StringComparison.Ordinal);
        Assert.Equal(2, await AskB(session));
    }

    [Theory]
    [InlineData("ff fe 31 0a", "no text reply")]
    [InlineData("31 2e 35 00 0a", "no text reply")]
    [InlineData("0a", "empty")]
    [InlineData("31 2c 32 0a", "more elements")]
    [InlineData("41 3f 0a", "echo")] // A? itself
    public async Task What_is_no_answer_is_refused_by_name_and_the_link_recovers(string reply, string named)
    {
        using var session = await Open();
        Instrument.Once("A?", v => v.Raw(ReferenceFile.Hex(reply)));

        var e = await Assert.ThrowsAsync<LinkException>(() => Ask(session, "A?"));

        Assert.Contains(named, e.Message, StringComparison.Ordinal);
        Assert.DoesNotContain('\0', e.Message);
        Assert.Equal(2, await AskB(session));
        Assert.Equal(1, Instrument.Visits);
    }

    [Fact]
    public async Task An_endless_line_is_dropped_with_its_link()
    {
        using var session = await Open();
        Instrument.Once("A?", v => v.Raw(new byte[ReplyLine.Limit + 2].Select(_ => (byte)'1').ToArray()));

        await Assert.ThrowsAsync<LinkException>(() => Ask(session, "A?"));

        Assert.Equal(2, await AskB(session));
        Assert.Equal(2, Instrument.Visits);
    }

    [Fact]
    public async Task A_flood_that_does_not_end_breaks_the_link()
    {
        using var session = await Open(Options with { Reconnect = false });
        Instrument.Once("A?", async v =>
        {
            while (true)
            {
                await v.Raw("1\n1\n");
                Time.Advance(Options.Silence / 4);
            }
        });

        await Ask(session, "A?");
        var e = await Assert.ThrowsAsync<LinkException>(() => Ask(session, "B?"));

        Assert.Contains("cannot be resynchronised", e.Message, StringComparison.Ordinal);
        Assert.Equal(0, Instrument.Count("B?"));
    }

    [Fact]
    public async Task A_lost_reply_is_asked_for_again_where_the_options_say_so()
    {
        using var session = await Open(Options with { ReadAttempts = 2 });
        Instrument.Once("B?", _ => Task.CompletedTask);

        var answer = Ask(session, "B?");
        await Clock.Until(() => Instrument.Count("B?") == 1);
        Time.Advance(Options.ReplyWithin * 2);
        await Time.PassUntil(Options.Silence, () => answer.IsCompleted);

        Assert.Equal(2, await answer);
        Assert.Equal(2, Instrument.Count("B?"));
    }

    [Fact]
    public async Task A_setting_whose_check_was_lost_is_not_sent_again()
    {
        using var session = await Open(Options with { ReadAttempts = 3 });
        await Ask(session, "B?");
        var asked = Instrument.Count("SYSTem:ERRor?");
        Instrument.Once("SYSTem:ERRor?", _ => Task.CompletedTask);
        var set = session.Set("VOLT 48", Cancel);
        await Clock.Until(() => Instrument.Count("SYSTem:ERRor?") > asked);
        Time.Advance(Options.ReplyWithin * 2);

        await Assert.ThrowsAsync<LinkException>(() => set);
        await AskB(session);

        Assert.Equal(1, Instrument.Count("VOLT 48"));
    }

    [Fact]
    public async Task An_instrument_that_falls_silent_for_good_is_given_up_within_bounds()
    {
        using var session = await Open();
        Instrument.On("*IDN?", _ => Task.CompletedTask);
        Instrument.On("B?", _ => Task.CompletedTask);
        for (var n = 101; n < 110; n++)
        {
            Instrument.On($"*ESE {n};*ESE?", _ => Task.CompletedTask);
        }

        await LetTimeOut(Ask(session, "B?"), "B?");
        var again = Ask(session, "B?");
        await Time.PassUntil(Options.Silence * 600, () => again.IsCompleted);
        await Assert.ThrowsAsync<LinkException>(() => again);

        // Half-open: a new connection is taken and nobody answers.
        var anew = Ask(session, "B?");
        await Time.PassUntil(Options.Silence * 600, () => anew.IsCompleted);
        await Assert.ThrowsAsync<LinkException>(() => anew);
        Assert.Equal(1, Instrument.Count("B?"));
    }

    [Fact]
    public async Task Another_instrument_behind_the_same_address_is_refused()
    {
        using var session = await Open();
        Instrument.Once("B?", v => v.HangUp());
        await Assert.ThrowsAsync<LinkException>(() => Ask(session, "B?"));
        Instrument.On("*IDN?", "MAKER,MODEL,2,1.0");

        var e = await Assert.ThrowsAsync<LinkException>(() => Ask(session, "B?"));

        Assert.Contains("MAKER,MODEL,2,1.0", e.Message, StringComparison.Ordinal);
    }
}
