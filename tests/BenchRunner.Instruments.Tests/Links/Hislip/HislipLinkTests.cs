using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Instruments.Tests.Scripts;

namespace BenchRunner.Instruments.Tests.Links.Hislip;

/// <summary>The client's link over two real sockets, with a server that does what a test says (IVI-6.1; vectors of
/// tests/reference/scpi/hislip.json).</summary>
public class HislipLinkTests
{
    private static readonly SessionOptions Options = new()
    {
        ConnectWithin = TimeSpan.FromSeconds(30),
        WriteWithin = TimeSpan.FromSeconds(30),
        Lock = "bench1",
    };

    private readonly CancellationToken _cancel = TestContext.Current.CancellationToken;

    public static TheoryData<string> Faults() =>
        [.. ReferenceFile.Cases("hislip.json", "faults").Select(c => c.GetProperty("id").GetString()!)];

    [Fact]
    public async Task A_session_is_opened_locked_and_asked_as_the_standard_says()
    {
        await using var peer = new HislipPeer { On = (p, s) => p.Reply(s, "ACME,PSU-1000,12345,1.02\n") };
        using var link = await Open(peer);
        link.Write("*IDN?\n"u8);
        Assert.Equal("ACME,PSU-1000,12345,1.02\n", await Message(link));

        // S001, S006, S009, S033 and S011 of the vectors, but for our own two letters, name and sizes.
        var sent = peer.Received;
        Assert.Equal(
            [(false, 0, 0, 0x0100_4252u), (true, 17, 0, 7u), (true, 15, 0, 0u), (true, 4, 1, 15_000u),
                (false, 7, 0, 0xffff_ff00u)],
            sent.Select(s => (s.IsAsync, (int)s.Type, (int)s.Control, s.Parameter)));
        Assert.Equal(("hislip0", "bench1"), (sent[0].Text, sent[3].Text));
        Assert.Equal([0, 0, 0, 0, 4, 0, 0, 0], sent[2].Payload);
    }

    [Fact]
    public async Task A_long_message_is_cut_to_what_the_server_takes_header_counted()
    {
        var z3 = ReferenceFile.Case("hislip.json", "sequences", "Z003");
        await using var peer = new HislipPeer { Longest = 256 };
        using var link = await Open(peer);
        link.Write(new byte[500]);
        await Clock.Until(() => peer.Data.Length == 3);
        Assert.Equal(
            z3.GetProperty("payloads").EnumerateArray().Select(p => p.GetInt32()),
            peer.Data.Select(s => s.Payload.Length));
        Assert.Equal([6, 6, 7], peer.Data.Select(s => (int)s.Type));
        Assert.Equal([0xffff_ff00u, 0xffff_ff02u, 0xffff_ff04u], peer.Data.Select(s => s.Parameter));
    }

    [Fact]
    public async Task Exactly_one_message_says_that_the_reply_was_handed_up()
    {
        // Z004: query, whole reply handed over, status query, next query: 0, -, 1, 0.
        await using var peer = new HislipPeer { Status = 100, On = (p, s) => p.Reply(s, "1\n") };
        using var link = await Open(peer);
        link.Write("A?\n"u8);
        await Message(link);
        Assert.Equal(100, await link.ReadStatus(_cancel));
        link.Write("B?\n"u8);
        await Message(link);
        link.Write("C\n"u8);
        await Clock.Until(() => peer.Data.Length == 3);
        var status = peer.Received.Single(s => s.Type == 21);
        Assert.Equal(
            [0, 1, 0, 1],
            new[] { peer.Data[0], status, peer.Data[1], peer.Data[2] }.Select(s => (int)s.Control));
        Assert.Equal(0xffff_ff00, status.Parameter);
    }

    [Fact]
    public async Task The_status_of_an_instrument_that_was_sent_nothing_is_asked_with_the_identifier_before_the_first()
    {
        await using var peer = new HislipPeer { Status = 64 };
        using var link = await Open(peer);
        Assert.Equal(64, await link.ReadStatus(_cancel));
        Assert.Equal(0xffff_fefe, peer.Received[^1].Parameter);
    }

    [Fact]
    public async Task Parts_are_joined_and_the_end_comes_with_the_last_even_an_empty_one()
    {
        await using var peer = new HislipPeer
        {
            On = async (p, s) =>
            {
                await p.Synchronous(6, 0, 0xffff_ffff, "#15he");
                await p.Synchronous(6, 0, s.Parameter, "");
                await p.Synchronous(6, 0, s.Parameter, "llo\n");
                await p.Synchronous(7, 0, s.Parameter, "");
            },
        };
        using var link = await Open(peer);
        link.Write("A?\n"u8);
        Assert.Equal("#15hello\n", await Message(link));
    }

    [Fact]
    public async Task A_server_that_prefers_overlapped_is_left_by_device_clear()
    {
        await using var peer = new HislipPeer { Terms = (1, 0x0100_0007), On = (p, s) => p.Reply(s, "1\n") };
        using var link = await Open(peer);
        link.Write("A?\n"u8);
        await Message(link);
        Assert.Equal([0, 17, 15, 4, 19, 8, 7], peer.Received.Select(s => (int)s.Type));
        Assert.Equal(0, peer.Received.Single(s => s.Type == 8).Control);
        Assert.Equal(0xffff_ff00, peer.Data[0].Parameter);
    }

    [Theory]
    [InlineData(2, 0x0200_0007u, "insists on encryption")]
    [InlineData(4, 0x0100_0007u, "insists on encryption")]
    [InlineData(0, 0x0000_0007u, "0.0 where 1.0 was offered")]
    [InlineData(0, 0x0300_0007u, "3.0 where 1.0 was offered")]
    public async Task A_server_that_cannot_be_talked_with_is_refused(byte control, uint parameter, string why)
    {
        await using var peer = new HislipPeer { Terms = (control, parameter) };
        var e = await Assert.ThrowsAsync<LinkException>(() => Open(peer));
        Assert.Contains(why, e.Message, StringComparison.Ordinal);
    }

    [Theory]
    [InlineData(0, "locked by another controller")]
    [InlineData(3, "refuses to be locked")]
    public async Task An_instrument_that_grants_no_lock_is_not_used(byte answer, string why)
    {
        await using var peer = new HislipPeer { Lock = answer };
        var e = await Assert.ThrowsAsync<LinkException>(() => Open(peer));
        Assert.Contains(why, e.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_shared_lock_may_be_granted_by_either_code()
    {
        await using var peer = new HislipPeer { Lock = 2 };
        using var link = await Open(peer);
        Assert.Equal("bench1", peer.Received.Single(s => s.Type == 4).Text);
    }

    [Fact]
    public async Task A_clear_drops_what_is_under_way_and_starts_the_identifiers_anew()
    {
        await using var peer = new HislipPeer();
        using var link = await Open(peer);
        link.Write("A?\n"u8);
        await Clock.Until(() => peer.Data.Length == 1);
        await peer.Synchronous(6, 0, 0xffff_ff00, "half a re");
        var begun = new byte[4];
        Assert.Equal(4, await link.Read(begun, _cancel));
        await peer.Asynchronous(22, 0, 0);
        await link.Clear(_cancel);
        await peer.Synchronous(7, 0, 0xffff_ff02, "stale");
        link.Write("B?\n"u8);
        Assert.Equal(0xffff_ff00, (await Next(peer, 2)).Parameter);
        await peer.Synchronous(7, 0, 0xffff_ff00, "2\n");
        Assert.Equal("2\n", await Message(link));
    }

    [Fact]
    public async Task A_clear_that_is_not_finished_ends_the_link()
    {
        await using var peer = new HislipPeer { Clears = false };
        using var link = await Open(peer);
        using var stop = new CancellationTokenSource();
        var clear = link.Clear(stop.Token);
        await stop.CancelAsync();
        await Assert.ThrowsAnyAsync<OperationCanceledException>(async () => await clear);
        Assert.Throws<LinkException>(() => link.Write("A\n"u8));
    }

    [Theory]
    [InlineData(true)]
    [InlineData(false)]
    public async Task An_interruption_voids_the_reply_and_nothing_is_sent_before_both_halves(bool asyncFirst)
    {
        await using var peer = new HislipPeer();
        using var link = await Open(peer);
        link.Write("A?\n"u8);
        link.Write("OUTP 0\n"u8);
        await Clock.Until(() => peer.Data.Length == 2);
        await peer.Synchronous(7, 0, 0xffff_ff00, "the void reply\n");
        if (asyncFirst)
        {
            await peer.Asynchronous(14, 0, 0xffff_ff02);
        }

        await peer.Synchronous(13, 0, 0xffff_ff02);
        var read = link.Read(new byte[16], _cancel).AsTask();
        if (!asyncFirst)
        {
            var write = Task.Run(() => link.Write("B\n"u8), _cancel);
            await peer.Asynchronous(14, 0, 0xffff_ff02);
            await write;
        }

        var e = await Assert.ThrowsAsync<ReplyException>(() => read);
        Assert.Equal(ReplyFault.Interrupted, e.Fault);

        // The link stands.
        link.Write("C?\n"u8);
        var asked = await Next(peer, asyncFirst ? 3 : 4);
        await peer.Reply(asked, "3\n");
        Assert.Equal("3\n", await Message(link));
    }

    [Fact]
    public async Task An_interruption_of_a_reply_that_was_handed_up_voids_nothing()
    {
        await using var peer = new HislipPeer();
        using var link = await Open(peer);
        link.Write("A?\n"u8);
        await peer.Reply(await Next(peer, 1), "1\n");
        Assert.Equal("1\n", await Message(link));
        link.Write("OUTP 0\n"u8);
        link.Write("B?\n"u8);
        await Next(peer, 3);
        await peer.Synchronous(13, 0, 0xffff_ff02);
        await peer.Asynchronous(14, 0, 0xffff_ff02);
        await peer.Reply(peer.Data[2], "2\n");
        Assert.Equal("2\n", await Message(link));
    }

    [Theory]
    [MemberData(nameof(Faults))]
    public async Task Each_faulty_input_is_refused_or_dropped_over_the_wire(string id)
    {
        var one = ReferenceFile.Case("hislip.json", "faults", id);
        var bytes = ReferenceFile.Hex(one.GetProperty("hex").GetString()!);
        var error = one.GetProperty("expect").GetProperty("error").GetString()!;
        if (error is "unsupported-version" or "bad-payload")
        {
            var parameter = System.Buffers.Binary.BinaryPrimitives.ReadUInt32BigEndian(bytes.AsSpan(4));
            await using var starting = error == "bad-payload"
                ? new HislipPeer { Longest = null } : new HislipPeer { Terms = (bytes[3], parameter) };
            var e = await Assert.ThrowsAsync<LinkException>(() => Open(starting));
            Assert.Contains(
                error == "bad-payload" ? "of another length than its type has" : "that was not offered",
                e.Message,
                StringComparison.Ordinal);
            return;
        }

        await using var peer = new HislipPeer();
        using var link = await Open(peer);
        var notes = new List<string>();
        link.Discarded += notes.Add;
        link.Write("A?\n"u8);
        link.Write("B?\n"u8);
        await Next(peer, 2);
        await peer.Raw(error == "wrong-channel" ? 1 : 0, bytes);
        switch (error)
        {
            case "stale-message" or "unrecognized-type" or "unrecognized-vendor-type":
                await peer.Synchronous(7, 0, 0xffff_ff02, "2\n");
                Assert.Equal("2\n", await Message(link));
                Assert.Single(notes);
                return;
            case "discarded":
                await link.Clear(_cancel);
                link.Write("C?\n"u8);
                await peer.Reply(await Next(peer, 3), "3\n");
                Assert.Equal("3\n", await Message(link));
                return;
            case "truncated":
                peer.HangUp();
                await Assert.ThrowsAsync<LinkException>(async () => await Message(link));
                return;
            case "wrong-channel":
                await Assert.ThrowsAsync<LinkException>(async () => await link.ReadStatus(_cancel));
                return;
            default:
                await Assert.ThrowsAsync<LinkException>(async () => await Message(link));
                return;
        }
    }

    [Fact]
    public async Task A_flood_of_messages_that_nothing_asked_for_ends_the_link()
    {
        await using var peer = new HislipPeer();
        using var link = await Open(peer);
        link.Write("A?\n"u8);
        await Next(peer, 1);
        for (var n = 0; n < 200; n++)
        {
            await peer.Synchronous(7, 0, 0x1234, "x");
        }

        var e = await Assert.ThrowsAsync<LinkException>(async () => await Message(link));
        Assert.Contains("nothing had asked for", e.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task What_the_server_says_of_a_fatal_error_is_told_escaped()
    {
        await using var peer = new HislipPeer();
        using var link = await Open(peer);
        link.Write("A?\n"u8);
        await Next(peer, 1);
        await peer.Synchronous(2, 4, 0, "too many\u001b[2J");
        var e = await Assert.ThrowsAsync<LinkException>(async () => await Message(link));
        Assert.Contains("FatalError 4: too many", e.Message, StringComparison.Ordinal);
        Assert.DoesNotContain('\u001b', e.Message);
    }

    private static async Task<HislipPeer.Sent> Next(HislipPeer peer, int count)
    {
        await Clock.Until(() => peer.Data.Length >= count);
        return peer.Data[count - 1];
    }

    private Task<ILink> Open(HislipPeer peer) => Link.Open(peer.Address, Options, TimeProvider.System, _cancel);

    private async Task<string> Message(ILink link)
    {
        var text = new System.Text.StringBuilder();
        var buffer = new byte[64];
        do
        {
            text.Append(System.Text.Encoding.ASCII.GetString(buffer, 0, await link.Read(buffer, _cancel)));
        }
        while (!link.AtEnd);
        return text.ToString();
    }
}
