using System.Globalization;
using System.Text.Json;
using FakeBench.Hosting;
using FakeBench.Hosting.Hislip;
using FakeBench.Tests.Scpi;

namespace FakeBench.Tests.Hosting.Hislip;

/// <summary>The server's codec and answers against tests/reference/scpi/hislip.json: each case names its clause of
/// IVI-6.1; an independent protocol analyser read all messages alike.</summary>
public sealed class HislipVectorTests
{
    public static TheoryData<string> Messages() =>
        [.. ScpiReference.Cases("hislip.json", "messages").Select(c => c.Text("id"))];

    public static TheoryData<string> Faults() =>
        [.. ScpiReference.Cases("hislip.json", "faults").Select(c => c.Text("id"))];

    [Theory]
    [MemberData(nameof(Messages))]
    public void A_message_is_read_and_written_again_byte_for_byte(string id)
    {
        JsonElement one = ScpiReference.Cases("hislip.json", "messages").Single(c => c.Text("id") == id);
        JsonElement expect = one.GetProperty("expect");
        byte[] bytes = Hex(one.Text("hex"));
        Frame frame = Frame.Open(bytes.AsSpan(0, Frame.Head), out int length) with { Payload = bytes[Frame.Head..] };
        Assert.Equal(expect.GetProperty("type").GetInt32(), frame.Kind);
        Assert.Equal(expect.GetProperty("control_code").GetInt32(), frame.Control);
        Assert.Equal(expect.Text("parameter"), string.Create(CultureInfo.InvariantCulture, $"0x{frame.Parameter:x8}"));
        Assert.Equal(expect.GetProperty("payload_length").GetInt32(), length);
        Assert.Equal(bytes, frame.ToBytes());
    }

    /// <summary>What a client sends is answered: those of version 2.0 with an Error, the others as their kind is.</summary>
    [Theory]
    [MemberData(nameof(Messages))]
    public async Task A_client_s_message_is_answered_on_its_channel(string id)
    {
        JsonElement one = ScpiReference.Cases("hislip.json", "messages").Single(c => c.Text("id") == id);
        byte kind = Hex(one.Text("hex"))[2];
        if (one.Text("from") != "client" || kind is Kind.Initialize or Kind.AsyncInitialize)
        {
            // A server's message, or the start, with which every session here begins.
            return;
        }

        await using BenchServer server = Start();
        using HislipClient client = await HislipClient.Connect(Link(server));
        bool isAsync = one.Text("channel") == "async";
        await HislipClient.Send(isAsync ? client.Asynchronous : client.Synchronous, Hex(one.Text("hex")));
        byte answer = kind switch
        {
            >= 26 => Kind.Error,
            Kind.AsyncLock => Kind.AsyncLockResponse,
            Kind.AsyncLockInfo => Kind.AsyncLockInfoResponse,
            Kind.AsyncRemoteLocalControl => Kind.AsyncRemoteLocalResponse,
            Kind.AsyncMaximumMessageSize => Kind.AsyncMaximumMessageSizeResponse,
            Kind.AsyncDeviceClear => Kind.AsyncDeviceClearAcknowledge,
            Kind.AsyncStatusQuery => Kind.AsyncStatusResponse,
            Kind.DeviceClearComplete => Kind.Error, // no clear has begun
            _ => byte.MaxValue,
        };
        if (answer != byte.MaxValue)
        {
            Assert.Equal(answer, (await client.Next(isAsync ? client.Asynchronous : client.Synchronous)).Kind);
        }

        if (kind == Kind.AsyncDeviceClear)
        {
            await client.Say(0, "", kind: Kind.DeviceClearComplete);
        }

        // In step still.
        await client.Say(0xffff_ff00, "\n", control: 1);
        await client.Say(0xffff_ff02, "*OPC?\n", control: 1);
        string said = "";
        while (said != "1\n")
        {
            said = System.Text.Encoding.Latin1.GetString((await client.Next(client.Synchronous)).Payload);
        }
    }

    /// <summary>Faulty inputs as a client would send them; those that only a server can send are the client's
    /// matter.</summary>
    [Theory]
    [MemberData(nameof(Faults))]
    public async Task A_faulty_input_is_answered_as_its_kind_asks(string id)
    {
        JsonElement one = ScpiReference.Cases("hislip.json", "faults").Single(c => c.Text("id") == id);
        string error = one.GetProperty("expect").Text("error");
        byte[] bytes = Hex(one.Text("hex"));
        await using BenchServer server = Start();
        using HislipClient client = await HislipClient.Connect(Link(server));
        switch (error)
        {
            case "poorly-formed-header" or "too-large":
                await HislipClient.Send(client.Synchronous, bytes);
                Assert.Equal(
                    (Kind.FatalError, error == "too-large" ? 0 : 1),
                    await KindAndCode(client, client.Synchronous));
                Assert.True(await client.IsClosed(client.Synchronous));
                Assert.True(await client.IsClosed(client.Asynchronous));
                return;
            case "truncated":
                await HislipClient.Send(client.Synchronous, bytes);
                client.Synchronous.Shutdown(System.Net.Sockets.SocketShutdown.Send);
                Assert.True(await client.IsClosed(client.Synchronous));
                Assert.True(await client.IsClosed(client.Asynchronous));
                return;
            case "unrecognized-type" or "unrecognized-vendor-type" or "out-of-sequence":
                await HislipClient.Send(client.Synchronous, bytes);
                Assert.Equal(
                    (Kind.Error, error == "unrecognized-vendor-type" ? 3 : 1),
                    await KindAndCode(client, client.Synchronous));
                break;
            case "wrong-channel" or "bad-payload":
                // The request that the faulty response of X018 answers.
                bytes[2] = error == "bad-payload" ? Kind.AsyncMaximumMessageSize : bytes[2];
                await HislipClient.Send(client.Asynchronous, bytes);
                Assert.Equal(
                    (Kind.Error, error == "bad-payload" ? 0 : 1),
                    await KindAndCode(client, client.Asynchronous));
                break;
            case "discarded":
                await client.Request(Kind.AsyncDeviceClear);
                await HislipClient.Send(client.Synchronous, bytes);
                await client.Say(0, "", kind: Kind.DeviceClearComplete);
                Assert.Equal((Kind.DeviceClearAcknowledge, 0), await KindAndCode(client, client.Synchronous));
                break;
            default:
                Assert.True(error is "stale-message" or "unsupported-version", $"{error}: nothing is tried for it");
                return;
        }

        await client.Say(0xffff_ff00, "*OPC?\n", control: 1);
        Assert.Equal("1\n", await client.Heard(0xffff_ff00));
    }

    private static async Task<(byte Kind, int Code)> KindAndCode(
        HislipClient client, System.Net.Sockets.Socket socket)
    {
        Frame frame = await client.Next(socket);
        return (frame.Kind, frame.Control);
    }

    private static BenchServer Start() => new(new ServeOptions { Hislip = true }, TimeProvider.System);

    private static string Link(BenchServer server) => server.Links.Single(l => l.Role == "supply").Link;

    private static byte[] Hex(string text) => Convert.FromHexString(text.Replace(" ", "", StringComparison.Ordinal));
}
