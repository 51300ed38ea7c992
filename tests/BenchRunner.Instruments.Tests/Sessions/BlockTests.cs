using System.Globalization;
using System.Text;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Instruments.Tests.Scripts;
using CsCheck;

namespace BenchRunner.Instruments.Tests.Sessions;

/// <summary>Blocks over a real socket.</summary>
public class BlockTests : SessionFixture
{
    [Fact]
    public async Task Any_bytes_in_any_segments_come_out_as_they_went_in()
    {
        using var session = await Open();
        var random = new Random(20261);
        foreach (var length in new[] { 0, 1, 2, 63, 64, 65, 4096, 200_000 })
        {
            var data = new byte[length];
            random.NextBytes(data);
            Instrument.Once("D?", async v =>
            {
                var reply = Block(data);
                for (var at = 0; at < reply.Length;)
                {
                    var piece = Math.Min(random.Next(1, 1 + Math.Max(length / 3, 2)), reply.Length - at);
                    await v.Raw(reply.AsMemory(at, piece));
                    at += piece;
                }
            });

            Assert.Equal(data, await AskBlock(session, 200_000));
        }

        Assert.Equal(2, await Ask(session, "B?"));
        Assert.False(Log.Has(InstrumentEventKind.Doubt));
    }

    [Theory]
    [InlineData("#15hel", "cut short")]
    [InlineData("#15hello", "without its newline")]
    [InlineData("#2", "cut short")]
    public async Task A_block_cut_by_the_end_of_the_stream_is_never_used(string sent, string named)
    {
        using var session = await Open();
        Instrument.Once("D?", async v =>
        {
            await v.Raw(sent);
            await v.HangUp();
        });

        var e = await Assert.ThrowsAsync<LinkException>(() => AskBlock(session));

        Assert.Contains(named, e.Message, StringComparison.Ordinal);
        Assert.Equal(2, await AskB(session));
        Assert.Equal(2, Instrument.Visits);
    }

    [Fact]
    public async Task A_block_that_stops_in_the_middle_costs_the_connection()
    {
        using var session = await Open();
        Instrument.Once("D?", v => v.Raw("#3100" + new string('x', 40)));

        var asked = AskBlock(session);
        await Time.PassUntil(Options.ReplyWithin / 10, () => asked.IsCompleted);

        await Assert.ThrowsAsync<LinkException>(() => asked);
        Assert.Equal(2, await AskB(session));
        Assert.Equal(2, Instrument.Visits);
    }

    [Fact]
    public async Task Cancelling_inside_a_block_costs_the_connection()
    {
        using var session = await Open();
        using var cancel = new CancellationTokenSource();
        Instrument.Once("D?", v => v.Raw("#3100" + new string('x', 40)));
        var asked = AskBlock(session, cancel: cancel.Token);
        await Clock.Until(() => Instrument.Count("D?") == 1);
        await cancel.CancelAsync();

        await Assert.ThrowsAnyAsync<OperationCanceledException>(() => asked);
        Assert.Equal(2, await AskB(session));
    }

    [Theory]
    [InlineData("#15helloX\n", "something after")]
    [InlineData("#15hello;1\n", "more units")]
    [InlineData("#15hello,#13abc\n", "more elements")]
    [InlineData("#9999999999", "longer than")]
    [InlineData("#42048", "longer than")]
    [InlineData("#0hello\n", "unknown length")]
    [InlineData("#x5hello\n", "no block header")]
    [InlineData("hello\n", "no block header")]
    [InlineData("D?\n", "echo")]
    public async Task What_is_no_block_of_the_due_length_is_refused_by_name(string sent, string named)
    {
        using var session = await Open();
        Instrument.Once("D?", v => v.Raw(sent));

        var e = await Assert.ThrowsAsync<LinkException>(() => AskBlock(session));

        Assert.Contains(named, e.Message, StringComparison.Ordinal);
        Assert.Equal(2, await AskB(session));
    }

    [Fact]
    public async Task A_reply_behind_a_block_is_dropped()
    {
        using var session = await Open();
        Instrument.Once("D?", v => v.Raw("#15hello\n17\n"));

        Assert.Equal("hello", Encoding.ASCII.GetString(await AskBlock(session)));
        Assert.Equal(2, await AskB(session));
    }

    [Fact]
    public void Any_bytes_at_all_are_a_reply_or_a_refusal()
    {
        Gen.Byte.Array[0, 40].Sample(bytes =>
        {
            using var reader = new Instruments.Replies.BlockReader();
            reader.Begin(32);
            try
            {
                for (var at = 0; at < bytes.Length && !reader.IsWhole;)
                {
                    var count = Math.Min(reader.Space.Length, bytes.Length - at);
                    bytes.AsSpan(at, count).CopyTo(reader.Space.Span);
                    reader.Advance(count);
                    at += count;
                }

                return !reader.IsWhole || reader.Block(0).Length <= 32;
            }
            catch (Instruments.Replies.ReplyException)
            {
                return true;
            }
        });
    }

    private static byte[] Block(byte[] data)
    {
        var length = data.Length.ToString(CultureInfo.InvariantCulture);
        return [.. Encoding.ASCII.GetBytes($"#{length.Length}{length}"), .. data, (byte)'\n'];
    }
}
