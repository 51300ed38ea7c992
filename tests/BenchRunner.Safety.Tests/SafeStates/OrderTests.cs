using BenchRunner.Acceptance.Events;
using BenchRunner.Instruments.Roles;
using BenchRunner.Safety.SafeStates;
using BenchRunner.Safety.Tests.Benches;
using BenchRunner.Safety.Watches;
using BenchRunner.Signals.Units;
using Microsoft.Extensions.Time.Testing;

namespace BenchRunner.Safety.Tests.SafeStates;

/// <summary>In which order the safe state tells the instruments, and what waits for what.</summary>
public sealed class OrderTests
{
    private readonly FakeTimeProvider _time = new();
    private readonly Recorder _said = new();

    [Fact]
    public async Task Supply_off_goes_out_first_and_bleeder_on_waits_for_no_answer()
    {
        // The supply never answers.
        var supply = new Part("supply", Timeout.InfiniteTimeSpan);
        var bleeder = new Part("interlock", TimeSpan.Zero);
        var meter = new Meter(400);
        Task<SafeStateReport> reaching = State(supply, bleeder, meter).Reach();

        Assert.True(supply.Told < bleeder.Told, "supply first");
        Assert.NotEqual(0, bleeder.Told);
        meter.Volts = 0.5;
        await Eventually.True(
            () =>
            {
                _time.Advance(TimeSpan.FromMilliseconds(20));
                return reaching.IsCompleted;
            },
            "the safe state");
        Assert.Contains(
            (await reaching).Doubts,
            doubt => doubt.StartsWith("supply did not confirm", StringComparison.Ordinal));
    }

    [Fact]
    public async Task The_off_bias_stays_until_the_bus_is_proved_down()
    {
        bool isTaken = false;
        var meter = new Meter(300);
        SafeState state = new(
            Roles(new Part("supply", TimeSpan.Zero), new Part("interlock", TimeSpan.Zero), meter), Witness(), Events(), _time)
        {
            AfterProof = _ =>
            {
                Assert.True(meter.Volts < 60);
                isTaken = true;
                return Task.CompletedTask;
            },
        };
        Task<SafeStateReport> reaching = state.Reach();
        for (int i = 0; i < 10; i++)
        {
            _time.Advance(TimeSpan.FromMilliseconds(20));
            Assert.False(isTaken);
        }

        // As the bleeder of 5 kOhm across 50 uF does it.
        await Eventually.True(
            () =>
            {
                _time.Advance(TimeSpan.FromMilliseconds(20));
                meter.Volts *= Math.Exp(-0.02 / 0.25);
                return reaching.IsCompleted;
            },
            "the proof");
        Assert.True((await reaching).Proved);
        Assert.True(isTaken);
    }

    private SafeState State(Part supply, Part bleeder, Meter meter) =>
        new(Roles(supply, bleeder, meter), Witness(), Events(), _time);

    private static SafeableRoles Roles(Part supply, Part bleeder, Meter meter) =>
        new(new Part("pulser", TimeSpan.Zero), supply, bleeder, meter);

    private BusWitness Witness() => LiveBench.Witness(time: _time);

    private EventSource Events() => new("safe-state", _said, _time);

    private sealed class Part(string role, TimeSpan answersAfter) : ISafeable
    {
        private static int _order;

        public string Role => role;

        /// <summary>As which it was told; 0: not yet.</summary>
        public int Told { get; private set; }

        public Task MakeSafe(CancellationToken cancel)
        {
            Told = Interlocked.Increment(ref _order);
            return answersAfter == TimeSpan.Zero ? Task.CompletedTask : Task.Delay(answersAfter, TimeProvider.System, cancel);
        }
    }

    private sealed class Meter(double volts) : IVoltmeter
    {
        public double Volts { get; set; } = volts;

        public InstrumentIdentity Identity => throw new NotSupportedException();

        public Task<Volts> Read(CancellationToken cancel) => Task.FromResult(new Volts(Volts));
    }
}
