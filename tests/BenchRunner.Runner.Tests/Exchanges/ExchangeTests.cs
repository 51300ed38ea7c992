using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Exchanges;
using BenchRunner.Runner.Tests.Workplaces;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Supervision;
using BenchRunner.Safety.Watches;
using Microsoft.Extensions.Time.Testing;

namespace BenchRunner.Runner.Tests.Exchanges;

public sealed class ExchangeTests : IDisposable
{
    private readonly Workplace _place = new();
    private readonly RecordingSink _heard = new();

    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task The_loop_is_seen_open_before_the_device_goes_in_and_closed_after()
    {
        Bench bench = _place.Bench();
        await using FakeBenchProcess fake = await FakeBenchProcess.Start(
            bench, Workplace.Device, null, TimeProvider.System, Cancel);
        await using OpenBench open = await Open(bench, fake);
        var hands = new Hands(fake, async () => (await open.Safety.Interlock.Read(Cancel)).LoopClosed);

        await using SafetySupervisor supervisor = await Watching(bench, open);
        var enclosure = new Enclosure(supervisor, TimeProvider.System);
        var exchange = new Exchange(hands, enclosure, Events(TimeProvider.System), TimeProvider.System);
        await exchange.Insert("W1200-0002", Cancel);

        Assert.Equal(["open while closed", "insert W1200-0002 while open", "close while open"], hands.Done);
        Assert.True((await open.Safety.Interlock.Read(Cancel)).LoopClosed);
        Assert.Equal(1, _heard.Count("device-exchanged"));
    }

    [Theory]
    [InlineData("open", "not seen open")]
    [InlineData("close", "not seen closed")]
    public async Task A_loop_that_does_not_follow_the_hands_ends_the_exchange(string idle, string why)
    {
        Bench bench = _place.Bench();
        await using FakeBenchProcess fake = await FakeBenchProcess.Start(
            bench, Workplace.Device, null, TimeProvider.System, Cancel);
        await using OpenBench open = await Open(bench, fake);
        var hands = new Hands(fake, () => Task.FromResult(true)) { Idle = idle };
        var time = new FakeTimeProvider();

        await using SafetySupervisor supervisor = await Watching(bench, open);
        Task exchange = new Exchange(hands, new Enclosure(supervisor, time), Events(time), time).Insert(
            "W1200-0002", Cancel);
        await Eventually.True(
            () =>
            {
                time.Advance(TimeSpan.FromMilliseconds(100));
                return exchange.IsCompleted;
            },
            "an end of the exchange");

        var failure = await Assert.ThrowsAsync<BenchException>(() => exchange);
        Assert.Contains(why, failure.Message, StringComparison.Ordinal);
        Assert.Equal(idle == "open" ? 1 : 3, hands.Done.Count);
        Assert.Equal(0, _heard.Count("device-exchanged"));
    }

    [Fact]
    public async Task Who_lets_an_exchange_wait_is_reminded_each_minute_of_what_is_waited_for()
    {
        Bench bench = _place.Bench();
        await using FakeBenchProcess fake = await FakeBenchProcess.Start(
            bench, Workplace.Device, null, TimeProvider.System, Cancel);
        await using OpenBench open = await Open(bench, fake);
        await using SafetySupervisor supervisor = await Watching(bench, open);
        var time = new FakeTimeProvider();
        var enclosure = new Enclosure(supervisor, time);
        async Task Pass(TimeSpan step, Func<bool> until) => await Eventually.True(
            () =>
            {
                time.Advance(step);
                return until();
            },
            "what is waited for");
        string[] Reminders() =>
            [.. _heard.Events.Where(said => said.Kind == "exchange-waits").Select(said => said.Message)];

        Task exchange = new ByHand(enclosure, Events(time), time).Exchange(
            Workplace.Device, "W1200-0002", enclosure.Openings, Cancel);
        time.Advance(TimeSpan.FromSeconds(59));
        Assert.Empty(Reminders());
        await Pass(TimeSpan.FromSeconds(1), () => Reminders().Length == 2);
        Assert.All(Reminders(), said => Assert.Contains("not opened yet", said, StringComparison.Ordinal));

        await fake.Do("open", Cancel);
        await Pass(TimeSpan.FromMilliseconds(20), () => _heard.Count("enclosure-open") == 1);
        await Pass(TimeSpan.FromSeconds(1), () => Reminders()[^1].Contains("not closed yet", StringComparison.Ordinal));
        Assert.False(exchange.IsCompleted);
        await fake.Do("close", Cancel);
        await Pass(TimeSpan.FromMilliseconds(20), () => exchange.IsCompleted);
        await exchange;
        Assert.Equal(1, _heard.Count("device-exchanged"));
    }

    private EventSource Events(TimeProvider time) => new("runner", _heard, time);

    private async Task<SafetySupervisor> Watching(Bench bench, OpenBench open)
    {
        var supervisor = new SafetySupervisor(
            open.Safety, bench.Envelope, new BusWitness(
                new Discharge(bench.Bleeder, bench.BusCapacitance), bench.Safety, TimeProvider.System),
            new Guardian(), Events(TimeProvider.System), TimeProvider.System);
        await supervisor.Start(Cancel);
        return supervisor;
    }

    private Task<OpenBench> Open(Bench bench, FakeBenchProcess fake) =>
        OpenBench.Open(bench, Workplace.Dialects(bench), fake.Links, _heard, InstrumentConnection.Wire, TimeProvider.System, Cancel);

    /// <summary>The fake bench's hands, watched; one of their moves may be left out.</summary>
    private sealed class Hands(IHands real, Func<Task<bool>> loopClosed) : IHands
    {
        public List<string> Done { get; } = [];

        public string? Idle { get; init; }

        public async Task Do(string hand, CancellationToken cancel)
        {
            Done.Add($"{hand} while {(await loopClosed() ? "closed" : "open")}");
            if (hand != Idle)
            {
                await real.Do(hand, cancel);
            }
        }
    }
}
