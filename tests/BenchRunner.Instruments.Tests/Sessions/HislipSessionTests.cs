using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Instruments.Tests.Scripts;

namespace BenchRunner.Instruments.Tests.Sessions;

/// <summary>A session over HiSLIP: replies by their marked ends, recovery by device clear without reconnecting (IVI-6.1,
/// 6.12).</summary>
public sealed class HislipSessionTests : IAsyncDisposable
{
    private static readonly SessionOptions Options = new()
    {
        ReplyWithin = TimeSpan.FromHours(1),
        ConnectWithin = TimeSpan.FromHours(1),
        WriteWithin = TimeSpan.FromSeconds(30),
        ReadAttempts = 1,
        SetDownAttempts = 1,
        ConnectAttempts = 1,
        Lock = "",
    };

    private readonly Clock _time = new();
    private readonly Recorder _log = new();
    private readonly HislipPeer _peer = new();
    private readonly CancellationToken _cancel = TestContext.Current.CancellationToken;
    private string? _silentTo;

    public HislipSessionTests() => _peer.On = Answer;

    public ValueTask DisposeAsync() => _peer.DisposeAsync();

    [Fact]
    public async Task After_a_time_out_the_device_is_cleared_and_the_connection_kept()
    {
        using var session = await Open();
        _silentTo = "A?\n";
        await LetTimeOut(session.Ask("A?", ReplyNumber.Parse, _cancel).AsTask(), "A?\n");
        var late = _peer.Data[^1];
        Assert.Equal(2, await session.Ask("B?", ReplyNumber.Parse, _cancel));
        Assert.Single(_peer.Received, s => s.Type == 19);

        // The late reply is of an identifier that nothing bears any more, or of one dropped: it answers nothing.
        await _peer.Synchronous(7, 0, late.Parameter + 0x1000, "99\n");
        Assert.Equal(2, await session.Ask("B?", ReplyNumber.Parse, _cancel));
        Assert.Equal((1, 1), (session.Connections, _peer.Connections));
        Assert.Contains(_log.Events, e => e.Kind == InstrumentEventKind.Resynchronised);
    }

    [Fact]
    public async Task A_time_out_inside_a_block_is_recovered_from_too()
    {
        using var session = await Open();
        _silentTo = "D?\n";
        var asked = session.AskBlock("D?", 100, b => b.ToArray(), _cancel).AsTask();
        await Clock.Until(() => _peer.Data.Any(s => s.Text == "D?\n"));
        await _peer.Raw(0, HislipPeer.Frame(7, 0, _peer.Data[^1].Parameter, "#15hello\n"u8)[..20]);
        await LetTimeOut(asked, "D?\n");

        // What is left of the block comes first, then what the clear is answered with.
        await _peer.Raw(0, "hello\n"u8.ToArray()[..5]);
        Assert.Equal(2, await session.Ask("B?", ReplyNumber.Parse, _cancel));
        Assert.Equal(1, session.Connections);
    }

    [Theory]
    [InlineData("#15hello\n", "hello")]
    [InlineData("#15hello", "hello")]
    [InlineData("#0hel\nlo\n", "hel\nlo")]
    [InlineData("#10\n", "")]
    public async Task A_block_ends_where_the_message_does(string sent, string data)
    {
        using var session = await Open();
        _silentTo = "D?\n";
        var asked = session.AskBlock("D?", 6, b => System.Text.Encoding.ASCII.GetString(b), _cancel).AsTask();
        await Clock.Until(() => _peer.Data.Any(s => s.Text == "D?\n"));
        await _peer.Reply(_peer.Data[^1], sent);
        Assert.Equal(data, await asked);
        Assert.Equal(2, await session.Ask("B?", ReplyNumber.Parse, _cancel));
        Assert.DoesNotContain(_peer.Received, s => s.Type == 19);
    }

    [Theory]
    [InlineData("#15hell")]
    [InlineData("#15hello\n\n")]
    [InlineData("#0hello")]
    [InlineData("#3")]
    [InlineData("")]
    public async Task A_block_that_the_message_does_not_hold_whole_is_refused_and_the_link_goes_on(string sent)
    {
        using var session = await Open();
        _silentTo = "D?\n";
        var asked = session.AskBlock("D?", 6, b => b.Length, _cancel).AsTask();
        await Clock.Until(() => _peer.Data.Any(s => s.Text == "D?\n"));
        await _peer.Reply(_peer.Data[^1], sent);
        await Assert.ThrowsAsync<LinkException>(() => asked);
        Assert.Equal(2, await session.Ask("B?", ReplyNumber.Parse, _cancel));
        Assert.Equal(1, session.Connections);
    }

    [Fact]
    public async Task A_block_of_unknown_length_is_bounded()
    {
        using var session = await Open();
        _silentTo = "D?\n";
        var asked = session.AskBlock("D?", 6, b => b.Length, _cancel).AsTask();
        await Clock.Until(() => _peer.Data.Any(s => s.Text == "D?\n"));
        await _peer.Reply(_peer.Data[^1], "#0longer than is due\n");
        var e = await Assert.ThrowsAsync<LinkException>(() => asked);
        Assert.Contains("longer than what is due", e.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_reply_needs_no_newline_and_holds_none_inside()
    {
        using var session = await Open();
        Assert.Equal(7, await session.Ask("BARE?", ReplyNumber.Parse, _cancel));
        await Assert.ThrowsAsync<LinkException>(() => session.Ask("TWO?", ReplyNumber.Parse, _cancel).AsTask());
        Assert.Equal(2, await session.Ask("B?", ReplyNumber.Parse, _cancel));
    }

    [Fact]
    public async Task What_sets_down_while_a_reply_is_due_is_obeyed_and_sent_again_behind_the_clear()
    {
        using var session = await Open();
        _silentTo = "A?\n";
        var asked = session.Ask("A?", ReplyNumber.Parse, _cancel).AsTask();
        await Clock.Until(() => _peer.Data.Any(s => s.Text == "A?\n"));
        session.SendNow("OUTP 0");
        await Clock.Until(() => _peer.Data.Any(s => s.Text == "OUTP 0\n"));
        var id = _peer.Data[^1].Parameter;
        await _peer.Synchronous(13, 0, id);
        await _peer.Asynchronous(14, 0, id);

        // At once, not at its deadline: the test's clock stands.
        await Assert.ThrowsAsync<LinkException>(() => asked);
        await session.SetDown(["INH"], _cancel);
        var order = _peer.Received.Where(s => s.Type is 7 or 8).Select(s => s.Type == 8 ? "clear" : s.Text).ToList();
        Assert.Equal(
            ["A?\n", "OUTP 0\n", "INH\n", "clear", "OUTP 0\n", "INH\n", "SYSTem:ERRor?\n"],
            order[order.IndexOf("A?\n")..]);
        Assert.Equal(1, session.Connections);
    }

    [Fact]
    public async Task A_question_that_is_refused_shows_in_the_status_byte_and_one_that_is_not_is_answered()
    {
        using var session = await Open();
        Assert.Equal("2", await Probe(session, "B?"));
        _silentTo = "OTHER?\n";
        _peer.Status = 1 << 2;
        Assert.Null(await Probe(session, "OTHER?"));
        Assert.DoesNotContain(_peer.Received, s => s.Type == 19);
    }

    [Fact]
    public async Task A_clear_that_is_not_answered_breaks_the_wire_and_a_new_one_is_opened()
    {
        using var session = await Open();
        _silentTo = "A?\n";
        await LetTimeOut(session.Ask("A?", ReplyNumber.Parse, _cancel).AsTask(), "A?\n");
        _peer.Clears = false;
        var asked = session.Ask("B?", ReplyNumber.Parse, _cancel).AsTask();
        await Clock.Until(() => _peer.Received.Any(s => s.Type == 19));
        _time.Advance(Options.ReplyWithin * 2);
        await Assert.ThrowsAsync<LinkException>(() => asked);
        Assert.Equal(2, await session.Ask("B?", ReplyNumber.Parse, _cancel));
        Assert.Equal(2, session.Connections);
    }

    private async Task<string?> Probe(ScpiSession session, string query)
    {
        var probe = session.Probe(query, _cancel);
        await _time.PassUntil(TimeSpan.FromMilliseconds(1), () => probe.IsCompleted);
        var (answer, error) = await probe;
        Assert.True(error.IsNone);
        return answer;
    }

    private Task<ScpiSession> Open() => ScpiSession.Open("supply", _peer.Address, Options, _time, _log, _cancel);

    private async Task LetTimeOut(Task exchange, string question)
    {
        await Clock.Until(() => _peer.Data.Any(s => s.Text == question));
        _time.Advance(Options.ReplyWithin * 2);
        await Assert.ThrowsAsync<LinkException>(() => exchange);
    }

    private Task Answer(HislipPeer peer, HislipPeer.Sent question) => question.Text switch
    {
        var text when text == _silentTo => Task.CompletedTask,
        "*IDN?\n" => peer.Reply(question, "MAKER,MODEL,1,1.0\n"),
        "SYSTem:ERRor?\n" => peer.Reply(question, "0,\"No error\"\n"),
        "A?\n" => peer.Reply(question, "1\n"),
        "B?\n" => peer.Reply(question, "2\r\n"),
        "BARE?\n" => peer.Reply(question, "7"),
        "TWO?\n" => peer.Reply(question, "1\n2\n"),
        _ => Task.CompletedTask,
    };
}
