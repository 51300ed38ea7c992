using System.Text;
using BenchRunner.Instruments.Dialects;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Instruments.Tests.Scripts;

namespace BenchRunner.Instruments.Tests.Dialects;

/// <summary>What a dialect says of the wire is obeyed: each habit against an instrument that has it and nothing
/// else.</summary>
public sealed class WireHabitTests
{
    private readonly CancellationToken _cancel = TestContext.Current.CancellationToken;
    private readonly Recorder _log = new();
    private readonly Clock _clock = new();

    [Theory]
    [InlineData(Terminator.NewLine, "\n")]
    [InlineData(Terminator.CarriageReturnNewLine, "\r\n")]
    [InlineData(Terminator.CarriageReturn, "\r")]
    public async Task Messages_and_replies_end_as_the_dialect_says(Terminator terminator, string end)
    {
        using var odd = OddInstrument.OnSocket(end, line => Standard(line, end) ?? "");
        using var session = await Open(odd, new WireHabits { Terminator = terminator });

        await session.Set("VOLT 48", _cancel);
        Assert.Equal(2, await Ask(session, "B?"));
        Assert.Equal(2, await Ask(session, "B?"));
        Assert.Equal([1, 10, 13, 2], await session.AskBlock("D?", 16, b => b.ToArray(), _cancel));
        Assert.Equal(2, await Ask(session, "B?"));

        Assert.Contains("VOLT 48", odd.Received);
        Assert.False(_log.Has(InstrumentEventKind.Doubt));
    }

    [Fact]
    public async Task Carriage_returns_alone_work_on_a_serial_line()
    {
        Assert.SkipUnless(OperatingSystem.IsLinux(), "needs a pseudo terminal");
        using var odd = OddInstrument.OnTerminal("\r", line => Standard(line, "\r") ?? "");
        using var session = await Open(odd, new WireHabits { Terminator = Terminator.CarriageReturn });

        Assert.Equal("MODEL", session.Identity.Model);
        Assert.Equal(2, await Ask(session, "B?"));
        session.SendNow("BYE");
    }

    [Fact]
    public async Task Another_error_query_is_asked_in_place_of_the_standard_one()
    {
        var failed = false;
        using var odd = OddInstrument.OnSocket("\n", line =>
        {
            failed |= line == "VOLT 4800";
            return line switch
            {
                "ERR?" when failed => Once(ref failed, "-222,\"Data out of range\"\n"),
                "ERR?" => "0\n",
                "SYSTem:ERRor?" => throw new IOException("it would not know that"),
                _ => Standard(line, "\n") ?? "",
            };
        });
        using var session = await Open(odd, new WireHabits { ErrorQuery = "ERR?" });

        await session.Set("VOLT 48", _cancel);
        var e = await Assert.ThrowsAsync<InstrumentException>(() => session.Set("VOLT 4800", _cancel));

        Assert.Contains("-222", e.Message, StringComparison.Ordinal);
        Assert.DoesNotContain("SYSTem:ERRor?", odd.Received);
    }

    [Theory]
    [InlineData(true)]
    [InlineData(false)]
    public async Task Without_an_error_queue_nothing_asks_for_one_and_completion_is_asked_for_where_it_is_known(
        bool knowsCompletion)
    {
        using var odd = OddInstrument.OnSocket("\n", line => line switch
        {
            "SYSTem:ERRor?" => "",
            "*OPC?" => knowsCompletion ? "1\n" : "",
            _ => Standard(line, "\n") ?? "",
        });
        using var session = await Open(
            odd, new WireHabits { ErrorQuery = null, HasOperationComplete = knowsCompletion });

        await session.Set("VOLT 48", _cancel);
        await session.SetDown(["OUTP 0"], _cancel);
        Assert.Equal(2, await Ask(session, "B?"));

        Assert.DoesNotContain("SYSTem:ERRor?", odd.Received);
        Assert.DoesNotContain("*CLS", odd.Received);
        Assert.Equal(knowsCompletion, odd.Received.Contains("*OPC?"));
        Assert.False(_log.Has(InstrumentEventKind.Doubt));
    }

    [Fact]
    public async Task Without_an_error_queue_a_question_of_another_kind_ends_as_a_silence_and_the_link_recovers()
    {
        using var odd = OddInstrument.OnSocket("\n", line => Standard(line, "\n") ?? "");
        using var session = await Open(odd, new WireHabits { ErrorQuery = null });

        var probe = session.Probe("OUTPut:STATe?", _cancel);
        await _clock.PassUntil(TimeSpan.FromMinutes(10), () => probe.IsCompleted);

        Assert.Null((await probe).Answer);
        var next = Ask(session, "B?");
        await _clock.PassUntil(TimeSpan.FromSeconds(1), () => next.IsCompleted);
        Assert.Equal(2, await next);
    }

    [Theory]
    [InlineData(false)]
    [InlineData(true)]
    public async Task An_echo_is_read_and_never_taken_for_the_reply(bool onTerminal)
    {
        Assert.SkipUnless(!onTerminal || OperatingSystem.IsLinux(), "needs a pseudo terminal");
        Func<string, string> answer = line => $"{line}\r\n{Standard(line, "\r\n")}";
        using var odd = onTerminal
            ? OddInstrument.OnTerminal("\n", answer) : OddInstrument.OnSocket("\n", answer);
        using var session = await Open(odd, new WireHabits { Echoes = true });

        await session.Set("VOLT 48", _cancel);
        session.SendNow("OUTP 0");
        Assert.Equal(2, await Ask(session, "B?"));
        Assert.Equal([1, 10, 13, 2], await session.AskBlock("D?", 16, b => b.ToArray(), _cancel));
        Assert.Equal("+2.0", (await session.Probe("B?", _cancel)).Answer);
        Assert.Equal(2, await Ask(session, "B?"));

        Assert.DoesNotContain(_log.Events, e => e.Kind is InstrumentEventKind.Doubt or InstrumentEventKind.Broken);
        session.SendNow("BYE");
    }

    [Fact]
    public async Task An_echo_that_is_garbled_is_a_doubt_by_name()
    {
        var garbles = false;
        using var odd = OddInstrument.OnSocket("\n", line =>
            $"{(garbles && line == "B?" ? "b!" : line)}\n{Standard(line, "\n")}");
        using var session = await Open(odd, new WireHabits { Echoes = true });
        garbles = true;

        var e = await Assert.ThrowsAsync<LinkException>(() => Ask(session, "B?"));

        Assert.Contains("not the echo that was due: 'b!'", e.Message, StringComparison.Ordinal);
        garbles = false;
        var next = Ask(session, "B?");
        await _clock.PassUntil(TimeSpan.FromSeconds(1), () => next.IsCompleted);
        Assert.Equal(2, await next);
    }

    [Theory]
    [InlineData("TRACE ", true, "TRACE #14\u0001\n\r\u0002\n")]
    [InlineData("", false, "#14\u0001\n\r\u0002")]
    [InlineData("", false, "#14\u0001\n\r\u0002\n")]
    [InlineData("DATA:", false, "DATA:#14\u0001\n\r\u0002\r\n")]
    public async Task A_block_may_have_text_before_it_and_nothing_behind_it(string before, bool hasEnd, string sent)
    {
        using var odd = OddInstrument.OnSocket("\n", line => line == "D?" ? sent : Standard(line, "\n") ?? "");
        using var session = await Open(odd, new WireHabits { BlockBefore = before, BlockHasEnd = hasEnd });

        for (var n = 0; n < 3; n++)
        {
            Assert.Equal([1, 10, 13, 2], await session.AskBlock("D?", 16, b => b.ToArray(), _cancel));
            Assert.Equal(2, await Ask(session, "B?"));
        }

        Assert.False(_log.Has(InstrumentEventKind.Doubt));
    }

    [Fact]
    public async Task Other_text_before_a_block_is_refused()
    {
        using var odd = OddInstrument.OnSocket("\n", line => line == "D?" ? "CURVE #11a\n" : Standard(line, "\n") ?? "");
        using var session = await Open(odd, new WireHabits { BlockBefore = "TRACE " });

        var e = await Assert.ThrowsAsync<LinkException>(
            () => session.AskBlock("D?", 16, b => b.ToArray(), _cancel).AsTask());

        Assert.Contains("no block header", e.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_link_in_doubt_is_opened_again_where_the_instrument_knows_no_number_to_ask_for()
    {
        var silent = true;
        using var odd = OddInstrument.OnSocket("\n", line =>
            line.StartsWith("*ESE", StringComparison.Ordinal) || (silent && line == "B?") ? "" : Standard(line, "\n") ?? "");
        using var session = await Open(odd, new WireHabits { ReopensToRecover = true });
        var lost = Ask(session, "B?");
        await Clock.Until(() => odd.Received.Contains("B?"));
        _clock.Advance(TimeSpan.FromHours(2));
        await Assert.ThrowsAsync<LinkException>(() => lost);
        silent = false;

        Assert.Equal(2, await Ask(session, "B?"));
        Assert.Equal(2, session.Connections);
        Assert.DoesNotContain(odd.Received, line => line.StartsWith("*ESE", StringComparison.Ordinal));
    }

    [Fact]
    public async Task A_reply_that_comes_twice_and_late_never_answers_a_numbered_question()
    {
        // The second copy of the first reply comes only after the next question was sent: on a stream nothing but the
        // number tells it from the answer.
        var (volts, previous, doubles) = (400.0, "", false);
        using var odd = OddInstrument.OnSocket("\n", line =>
        {
            if (!line.EndsWith(":MEAS:VOLT?", StringComparison.Ordinal))
            {
                return Standard(line, "\n") ?? "";
            }

            var reply = FormattableString.Invariant($"{line[5..line.IndexOf(';', StringComparison.Ordinal)]};0;{volts}\n");
            var sent = doubles ? previous + reply : reply;
            previous = reply;
            return sent;
        });
        using var session = await Open(odd, new WireHabits { Numbered = true });
        Assert.Equal(400, await session.AskSurely("MEAS:VOLT?", ReplyNumber.Parse, _cancel));
        (volts, doubles) = (12, true);

        var asked = session.AskSurely("MEAS:VOLT?", ReplyNumber.Parse, _cancel).AsTask();
        var e = await Assert.ThrowsAsync<LinkException>(() => asked);
        Assert.Contains("the reply to an earlier question", e.Message, StringComparison.Ordinal);

        doubles = false;
        var next = session.AskSurely("MEAS:VOLT?", ReplyNumber.Parse, _cancel).AsTask();
        await _clock.PassUntil(TimeSpan.FromSeconds(1), () => next.IsCompleted);
        Assert.Equal(12, await next);
    }

    [Theory]
    [InlineData(false)]
    [InlineData(true)]
    public async Task An_instrument_that_was_switched_off_and_on_is_noticed_by_its_event_register(bool onTerminal)
    {
        Assert.SkipUnless(!onTerminal || OperatingSystem.IsLinux(), "needs a pseudo terminal");
        var events = 0;
        Func<string, string> answer = line => line.EndsWith(";*ESR?;:SENSe:DATA?", StringComparison.Ordinal)
            ? $"{line[5..line.IndexOf(';', StringComparison.Ordinal)]};{Taken(ref events)};1,0,1,0\n"
            : Standard(line, "\n") ?? "";
        using var odd = onTerminal ? OddInstrument.OnTerminal("\n", answer) : OddInstrument.OnSocket("\n", answer);
        using var session = await Open(odd, new WireHabits { Numbered = true });
        Assert.Equal("1,0,1,0", await session.AskSurely("SENSe:DATA?", b => Encoding.ASCII.GetString(b), _cancel));
        events = 128;

        var e = await Assert.ThrowsAsync<InstrumentException>(
            () => session.AskSurely("SENSe:DATA?", b => Encoding.ASCII.GetString(b), _cancel).AsTask());

        Assert.Contains("was switched off and on", e.Message, StringComparison.Ordinal);
        session.SendNow("BYE");
    }

    private static int Taken(ref int events)
    {
        var was = events;
        events = 0;
        return was;
    }

    private static string Once(ref bool failed, string entry)
    {
        failed = false;
        return entry;
    }

    private static string? Standard(string line, string end) => line switch
    {
        "*IDN?" => "MAKER,MODEL,1,1" + end,
        "SYSTem:ERRor?" => "0,\"No error\"" + end,
        "*OPC?" => "1" + end,
        "B?" => "+2.0" + end,
        "D?" => "#14\u0001\n\r\u0002" + end,
        _ when line.StartsWith("*ESE ", StringComparison.Ordinal) && line.EndsWith(";*ESE?", StringComparison.Ordinal) =>
            line[5..^6] + end,
        _ => null,
    };

    private async Task<ScpiSession> Open(OddInstrument odd, WireHabits habits)
    {
        var options = new SessionOptions
        {
            Habits = habits,
            ReplyWithin = TimeSpan.FromHours(1),
            ConnectWithin = TimeSpan.FromHours(1),
            WriteWithin = TimeSpan.FromSeconds(30),
            Silence = TimeSpan.FromSeconds(1),
            ReadAttempts = 1,
            ConnectAttempts = 1,
        };
        var open = ScpiSession.Open("supply", odd.Address, options, _clock, _log, _cancel);
        await _clock.PassUntil(TimeSpan.FromSeconds(1), () => open.IsCompleted);
        return await open;
    }

    private Task<double> Ask(ScpiSession session, string query) =>
        session.Ask(query, ReplyNumber.Parse, _cancel).AsTask();
}
