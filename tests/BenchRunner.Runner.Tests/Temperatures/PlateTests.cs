using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Temperatures;
using BenchRunner.Runner.Tests.Workplaces;
using Microsoft.Extensions.Time.Testing;

namespace BenchRunner.Runner.Tests.Temperatures;

/// <summary>Heating and soaking, on a clock that the test moves.</summary>
public sealed class PlateTests
{
    private readonly FakeTimeProvider _time = new();
    private readonly RecordingSink _heard = new();

    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    [Fact]
    public async Task It_heats_and_holds_for_the_whole_soak_at_rest()
    {
        var hotplate = new Hotplate(_time);

        TimeSpan took = await Pass(Plate(hotplate).Settle(125, 3, 120, Cancel));

        // A first-order plate of 30 s from 23 to 125 degC is within 3 K after 30 s · ln(102/3) = 105.8 s.
        Assert.InRange(took.TotalSeconds, 105.8 + 120, 105.8 + 130);
        Assert.Equal(125, hotplate.Set);
        Assert.Equal(1, _heard.Count("soak-started"));
        Assert.Equal(1, _heard.Count("soak-done"));
        Assert.InRange(_heard.Count("soaking"), 2, 4);
    }

    [Fact]
    public async Task Back_in_the_room_the_heater_is_off_and_the_plate_is_waited_for()
    {
        var hotplate = new Hotplate(_time) { Temperature = 125 };
        await Pass(Plate(hotplate).Settle(null, 3, 10, Cancel));

        Assert.Null(hotplate.Set);
        Assert.InRange(await hotplate.Read(Cancel), 20, 26);
    }

    [Fact]
    public async Task A_plate_that_has_the_temperature_of_the_room_is_not_waited_for()
    {
        var hotplate = new Hotplate(_time);
        TimeSpan took = await Pass(Plate(hotplate).Settle(null, 3, 120, Cancel));

        Assert.Equal(TimeSpan.Zero, took);
        Assert.Equal(0, _heard.Count("soak-started"));
    }

    [Fact]
    public async Task A_plate_that_does_not_come_up_ends_the_run()
    {
        var hotplate = new Hotplate(_time) { IsBroken = true };
        BenchException failed = await Assert.ThrowsAsync<BenchException>(
            () => Pass(Plate(hotplate).Settle(125, 3, 120, Cancel)));
        Assert.Contains("23 degC after 60 min where 125 degC was set", failed.Message, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_hotplate_that_is_gone_is_an_instrument_that_failed()
    {
        var hotplate = new Hotplate(_time) { IsGone = true };
        InstrumentException failed = await Assert.ThrowsAsync<InstrumentException>(
            () => Plate(hotplate).Settle(125, 3, 120, Cancel));
        Assert.Equal("hotplate", failed.Role);
    }

    [Fact]
    public async Task Without_a_hotplate_the_stated_temperature_of_the_room_is_the_plate_s()
    {
        Plate plate = Plate(null);
        await plate.Settle(null, 3, 120, Cancel);

        Assert.Equal(23, await plate.Read(Cancel));
        Assert.Null(await plate.Measured(Cancel));
    }

    private Plate Plate(IHotplate? hotplate) => new(hotplate, 23, new EventSource("runner", _heard, _time), _time);

    private async Task<TimeSpan> Pass(Task work)
    {
        long start = _time.GetTimestamp();
        while (!work.IsCompleted)
        {
            _time.Advance(TimeSpan.FromSeconds(0.5));
            await Task.Yield();
        }

        await work;
        return _time.GetElapsedTime(start);
    }

    private sealed class Hotplate(TimeProvider time) : IHotplate
    {
        private const double TimeConstant = 30;
        private const double Room = 23;

        private long _at = time.GetTimestamp();

        public double Temperature { get; set; } = Room;

        public double? Set { get; private set; }

        public bool IsBroken { get; init; }

        public bool IsGone { get; init; }

        public string Role => "hotplate";

        public InstrumentIdentity Identity => throw new NotSupportedException();

        public Task Heat(double celsius, CancellationToken cancel)
        {
            Move();
            Set = celsius;
            return Task.CompletedTask;
        }

        public Task<double> Read(CancellationToken cancel)
        {
            Move();
            return IsGone
                ? Task.FromException<double>(new LinkException("tcp 127.0.0.1:9", "connection lost", null))
                : Task.FromResult(Temperature);
        }

        public Task MakeSafe(CancellationToken cancel)
        {
            Move();
            Set = null;
            return Task.CompletedTask;
        }

        private void Move()
        {
            double seconds = time.GetElapsedTime(_at).TotalSeconds;
            _at = time.GetTimestamp();
            double end = IsBroken ? Room : Set ?? Room;
            Temperature = end + ((Temperature - end) * Math.Exp(-seconds / TimeConstant));
        }
    }
}
