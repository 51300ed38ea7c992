using System.Buffers.Binary;
using System.Text;
using BenchRunner.Instruments.Sessions;

namespace BenchRunner.Instruments.Links.Hislip;

/// <summary>Opens a HiSLIP session: both channels, the longest message, synchronised mode, the lock (IVI-6.1,
/// 6.1, 6.5, 6.9).</summary>
internal static class HislipOpening
{
    // Two letters that name the client's maker; no registered one.
    private const uint Vendor = ((uint)'B' << 8) | 'R';

    private const byte Granted = 1;

    // Servers differ whether a shared lock is granted by 1 or by 2.
    private const byte GrantedShared = 2;

    /// <summary>Opens one.</summary>
    /// <param name="address">Where the instrument is.</param>
    /// <param name="options">Bounds, and the lock to take.</param>
    /// <param name="time">The clock of the deadline.</param>
    /// <param name="cancel">Ends the attempt.</param>
    /// <exception cref="LinkException">Refused, silent, no HiSLIP, encrypted only, or locked by another
    /// controller.</exception>
    public static Task<ILink> Open(
        LinkAddress address, SessionOptions options, TimeProvider time, CancellationToken cancel) =>
        StreamSocket.Within(
            address.ToString(), options.ConnectWithin, token => Open(address, options, token), time, cancel);

    private static async Task<ILink> Open(LinkAddress address, SessionOptions options, CancellationToken cancel)
    {
        var name = address.ToString();
        HislipChannel? synchronous = null;
        HislipChannel? asynchronous = null;
        try
        {
            synchronous = await Connect(address, options, cancel);
            var terms = await Initialize(synchronous, name, address.SubAddress ?? "", cancel);
            asynchronous = await Connect(address, options, cancel);
            var requests = new HislipRequests(name, asynchronous, _ => { });
            await requests.Ask(
                new HislipHeader(HislipType.AsyncInitialize, 0, terms.Session, 0), default,
                HislipType.AsyncInitializeResponse, cancel);
            var longest = await Longest(requests, asynchronous, name, cancel);
            if (options.Lock is { } key)
            {
                await Lock(requests, name, key, options.ConnectWithin / 2, cancel);
            }

            var link = new HislipLink(name, (synchronous, asynchronous), longest, options.WriteWithin);
            if (terms.PrefersOverlapped)
            {
                await link.Clear(cancel);
            }

            return link;
        }
        catch
        {
            synchronous?.Dispose();
            asynchronous?.Dispose();
            throw;
        }
    }

    private static async Task<HislipChannel> Connect(
        LinkAddress address, SessionOptions options, CancellationToken cancel) =>
        new(address.ToString(), await StreamSocket.Connect(address, options.WriteWithin, cancel));

    private static async Task<HislipTerms> Initialize(
        HislipChannel channel, string name, string subAddress, CancellationToken cancel)
    {
        channel.Send(
            new HislipHeader(HislipType.Initialize, 0, ((uint)HislipTerms.Offered << 16) | Vendor, 0),
            Encoding.ASCII.GetBytes(subAddress));
        var header = await channel.Next(cancel);
        if (header.Type is HislipType.FatalError or HislipType.Error)
        {
            throw new LinkException(name, $"the instrument says {await channel.Text(header, cancel)}");
        }

        try
        {
            if (header.Type != HislipType.InitializeResponse)
            {
                throw new HislipException(HislipFault.OutOfSequence, $"{header.Type} where InitializeResponse is due");
            }

            var terms = HislipTerms.Read(header);
            terms.Check();
            return terms;
        }
        catch (HislipException e)
        {
            throw channel.Refused(e);
        }
    }

    private static async Task<ulong> Longest(
        HislipRequests requests, HislipChannel channel, string name, CancellationToken cancel)
    {
        var ours = new byte[sizeof(ulong)];
        BinaryPrimitives.WriteUInt64BigEndian(ours, HislipHeader.LongestPayload);
        await requests.Ask(
            new HislipHeader(HislipType.AsyncMaximumMessageSize, 0, 0, 0), ours,
            HislipType.AsyncMaximumMessageSizeResponse, cancel);
        var theirs = BinaryPrimitives.ReadUInt64BigEndian(await channel.Payload(sizeof(ulong), cancel));
        return theirs > HislipHeader.Size ? theirs : throw new LinkException(
            name, FormattableString.Invariant($"takes messages of {theirs} bytes only, which hold nothing"));
    }

    private static async Task Lock(
        HislipRequests requests, string name, string key, TimeSpan within, CancellationToken cancel)
    {
        var wait = (uint)within.TotalMilliseconds;
        var answer = await requests.Ask(
            new HislipHeader(HislipType.AsyncLock, 1, wait, 0), Encoding.ASCII.GetBytes(key),
            HislipType.AsyncLockResponse, cancel);
        if (answer.Control is not (Granted or GrantedShared))
        {
            throw new LinkException(name, answer.Control == 0
                ? FormattableString.Invariant($"locked by another controller for {within.TotalSeconds:0.###} s; ")
                    + "end what else uses the instrument"
                : FormattableString.Invariant($"refuses to be locked (AsyncLockResponse {answer.Control})"));
        }
    }
}
