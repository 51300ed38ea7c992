using System.Globalization;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Sessions;

namespace BenchRunner.Benchmarks;

/// <summary>What a session costs over what the wire costs: blocks, questions, settings, a peer that trickles, and
/// what a whole run asks a capture.</summary>
/// <remarks>Ours is the session as roles use it: asynchronous, with its deadline, cancellation and checks. The floor is a
/// blocking loop on a socket of its own to the same server.</remarks>
internal sealed class LinksGroup : IGroup
{
    private const int Blocks = 4;
    private const int Large = 2_000_000;
    private const int Small = 100_000;
    private const int Trickled = 5_000;

    // What the example sequence asks for between two trains, s.
    private const double Pause = 0.25;

    private readonly Lazy<(IReadOnlyList<CaptureTraffic> Captures, string? Ended)> _run;
    private readonly BareServer _stream = new();
    private readonly BareServer _hislip = new(isHislip: true);

    /// <summary>Sets the group up.</summary>
    /// <param name="seed">Seed of the fake bench of a whole run.</param>
    public LinksGroup(int seed)
    {
        _run = new(() => RunTraffic.Take(seed));
        foreach (BareServer server in (BareServer[])[_stream, _hislip])
        {
            server.Answer("LARGE?", BareServer.Block(Large));
            server.Answer("SMALL?", BareServer.Block(Small));
            server.Answer("TRICKLED?", BareServer.Block(Trickled));
        }

        Benchmarks =
        [
            new Benchmark("links/block-1m-tcp", () => BlockRate("tcp", "LARGE?", Large)),
            new Benchmark("links/block-100k-tcp", () => BlockRate("tcp", "SMALL?", Small)),
            new Benchmark("links/block-1m-hislip", () => BlockRate("hislip", "LARGE?", Large)),
            new Benchmark("links/query", Query),
            new Benchmark("links/set-query", SetQuery),
            new Benchmark("links/trickle", Trickle),
            new Benchmark("links/allocations", Allocations),
            new Benchmark("links/queries-a-capture", QueriesACapture),
            new Benchmark("links/time-a-capture", TimeACapture),
        ];
    }

    /// <inheritdoc/>
    public IReadOnlyList<Benchmark> Benchmarks { get; }

    /// <inheritdoc/>
    public void Dispose()
    {
        _stream.Dispose();
        _hislip.Dispose();
    }

    private static int Whole(int block) => BareServer.Block(block).Length;

    private static Figure Rate(Figure seconds, double bytes) =>
        new(bytes / 1e6 / seconds.Median, seconds.Spread, seconds.LeastWall);

    private ScpiSession Open(string link)
    {
        int port = (link == "tcp" ? _stream : _hislip).Port;
        LinkAddress address = LinkAddress.Parse(string.Create(CultureInfo.InvariantCulture, $"{link} 127.0.0.1:{port}"));
        return ScpiSession.Open(
            "scope", address, new SessionOptions(), TimeProvider.System, new NoLog(), CancellationToken.None)
            .GetAwaiter().GetResult();
    }

    private Outcome BlockRate(string link, string question, int length)
    {
        using ScpiSession session = Open(link);
        using var bare = new BareClient(_stream.Port, Whole(length));
        byte[] message = System.Text.Encoding.ASCII.GetBytes(question + "\n");
        int whole = Whole(length);
        (Figure ours, Figure floor) = WallRounds.Time(
            () => Wait(Ask(session, question, length)),
            () =>
            {
                for (int block = 0; block < Blocks; block++)
                {
                    bare.Exchange(message, whole);
                }
            });
        double bytes = (double)Blocks * length;
        return new Outcome("MB/s", Rate(ours, bytes), Floor: Rate(floor, bytes));
    }

    private Outcome Query()
    {
        using ScpiSession session = Open("tcp");
        using var bare = new BareClient(_stream.Port, 1024);
        (Figure ours, Figure floor) = WallRounds.Time(
            () => Wait(AskIdentity(session)), () => bare.Exchange("*IDN?\n"u8, "BENCHRUNNER,BARE,0,1\n".Length));
        return new Outcome("s", ours, Floor: floor);
    }

    private Outcome SetQuery()
    {
        using ScpiSession session = Open("tcp");
        using var bare = new BareClient(_stream.Port, 1024);
        (Figure ours, Figure floor) = WallRounds.Time(
            () => Wait(SetAndAsk(session)), () => bare.Exchange("*IDN?\n"u8, "BENCHRUNNER,BARE,0,1\n".Length));
        return new Outcome("s", ours, Floor: floor, Note: "the setting's error queue is read too: two round trips");
    }

    private Outcome Trickle()
    {
        using ScpiSession session = Open("tcp");
        using var bare = new BareClient(_stream.Port, Whole(Trickled));
        _stream.Trickles = true;
        (Figure ours, Figure floor) = WallRounds.Time(
            () => Wait(Ask(session, "TRICKLED?", Trickled, 1)),
            () => bare.Exchange("TRICKLED?\n"u8, Whole(Trickled)));
        _stream.Trickles = false;
        return new Outcome("s", ours, Floor: floor);
    }

    private Outcome Allocations()
    {
        using ScpiSession stream = Open("tcp");
        using ScpiSession messages = Open("hislip");
        double worst = Math.Max(Allocated(stream), Allocated(messages));
        return new Outcome("bytes", new Figure(worst, 0), Note: "the worse of raw socket and HiSLIP, 2 MB blocks");
    }

    private Outcome QueriesACapture()
    {
        (IReadOnlyList<CaptureTraffic> captures, string? ended) = _run.Value;
        if (ended is not null)
        {
            return Outcome.Without("questions", ended);
        }

        CaptureTraffic worst = captures.MaxBy(capture => capture.Reading - capture.Channels)!;
        return new Outcome(
            "questions", new Figure(worst.Reading - worst.Channels, 0), Note: string.Create(
                CultureInfo.InvariantCulture,
                $"to read the record, worst of {captures.Count} captures of {worst.Channels} channels in a whole run; with "
                    + $"arming, probes asked back and waiting {Middle(captures, c => c.OfScope)} questions in all"));
    }

    private Outcome TimeACapture()
    {
        (IReadOnlyList<CaptureTraffic> captures, string? ended) = _run.Value;
        if (ended is not null)
        {
            return Outcome.Without("s", ended);
        }

        double arming = Middle(captures, capture => capture.Arming);
        double transfer = Middle(captures, capture => capture.Transfer);
        return new Outcome(
            "s", new Figure(Middle(captures, capture => capture.Took), 0),
            Floor: new Figure(arming + transfer + Pause, 0), Note: string.Create(
                CultureInfo.InvariantCulture,
                $"train to train in a whole run, median of {captures.Count}; floor: arming {arming:G3} s, transfer "
                    + $"{transfer:G3} s, pause {Pause} s"));
    }

    private static double Middle(IReadOnlyList<CaptureTraffic> captures, Func<CaptureTraffic, double> of) =>
        captures.Select(of).Order().ElementAt(captures.Count / 2);

    private static double Allocated(ScpiSession session)
    {
        const int Warm = 50;
        const int Counted = 400;
        Wait(Ask(session, "LARGE?", Large, Warm));
        long before = GC.GetTotalAllocatedBytes(precise: true);
        Wait(Ask(session, "LARGE?", Large, Counted));
        return (GC.GetTotalAllocatedBytes(precise: true) - before) / (double)Counted;
    }

    private static async Task Ask(ScpiSession session, string question, int length, int blocks = Blocks)
    {
        for (int block = 0; block < blocks; block++)
        {
            int come = await session.AskBlock(question, length, static b => b.Length, CancellationToken.None);
            if (come != length)
            {
                throw new InvalidOperationException("Another length than asked for.");
            }
        }
    }

    private static async Task AskIdentity(ScpiSession session) =>
        await session.Ask("*IDN?", static reply => reply.Length, CancellationToken.None);

    private static async Task SetAndAsk(ScpiSession session)
    {
        await session.Set("VOLT 1", CancellationToken.None);
        await session.Ask("*IDN?", static reply => reply.Length, CancellationToken.None);
    }

    private static void Wait(Task work) => work.GetAwaiter().GetResult();

    private sealed class NoLog : IInstrumentLog
    {
        public void Report(InstrumentEvent what)
        {
        }
    }
}
