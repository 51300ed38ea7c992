using BenchRunner.Safety.Guardians;

namespace BenchRunner.Safety.Tests.Guardians;

/// <summary>What the guardian does about what it hears, and about silence.</summary>
public sealed class GuardianJudgeTests
{
    private static readonly GuardianOptions _options = new(At(0.5), At(10), At(30)) { DownBelow = 60 };
    private readonly GuardianJudge _judge = new(_options);

    [Fact]
    public void Silence_does_not_count_before_the_first_beat()
    {
        Assert.Equal(GuardianDeed.Listen, _judge.OnSilence(At(100)));
        Assert.Null(_judge.ActsAt);
    }

    [Fact]
    public void Silence_after_a_beat_counts_from_that_beat()
    {
        _judge.On(new Heard(HeardKind.Polled, 600, 600, 600), At(3));

        Assert.Equal(At(3.5), _judge.ActsAt);
        Assert.Equal(GuardianDeed.Listen, _judge.OnSilence(At(3.499)));
        Assert.Equal(GuardianDeed.Act, _judge.OnSilence(At(3.5)));
        Assert.Contains("no heartbeat for 500 ms", _judge.Reason, StringComparison.Ordinal);
    }

    [Theory]
    [InlineData(HeardKind.Malformed, GuardianDeed.Act)]
    [InlineData(HeardKind.Ended, GuardianDeed.Act)]
    [InlineData(HeardKind.Left, GuardianDeed.TakeOver)]
    [InlineData(HeardKind.Done, GuardianDeed.Leave)]
    [InlineData(HeardKind.Polled, GuardianDeed.Listen)]
    [InlineData(HeardKind.MakingSafe, GuardianDeed.SwitchOff)]
    public void Each_thing_heard_has_its_deed(HeardKind kind, GuardianDeed deed) =>
        Assert.Equal(deed, _judge.On(new Heard(kind, 600, 600, 600), At(1)));

    [Fact]
    public void It_switches_off_once_and_lets_a_run_make_safe_only_as_long_as_is_planned()
    {
        Assert.Equal(GuardianDeed.SwitchOff, _judge.On(MakingSafe(600), At(0)));
        for (double at = 0.1; at <= 10; at += 0.1)
        {
            Assert.Equal(GuardianDeed.Listen, _judge.On(MakingSafe(600), At(at)));
        }

        Assert.Equal(GuardianDeed.Act, _judge.On(MakingSafe(600), At(10.1)));
        Assert.Contains("10.0 s at most", _judge.Reason, StringComparison.Ordinal);
    }

    [Fact]
    public void A_run_whose_bus_is_proved_down_may_take_its_time()
    {
        _judge.On(MakingSafe(600), At(0));
        for (double at = 0.1; at < 60; at += 0.1)
        {
            Assert.Equal(GuardianDeed.Listen, _judge.On(MakingSafe(0), At(at)));
        }
    }

    [Fact]
    public void A_beat_after_making_safe_begins_a_new_way()
    {
        _judge.On(MakingSafe(600), At(0));
        _judge.On(new Heard(HeardKind.Polled), At(5));

        Assert.Equal(GuardianDeed.SwitchOff, _judge.On(MakingSafe(600), At(6)));
        Assert.Equal(GuardianDeed.Listen, _judge.On(MakingSafe(600), At(15)));
    }

    private static Heard MakingSafe(double volts) => new(HeardKind.MakingSafe, volts, volts, volts);

    private static TimeSpan At(double seconds) => TimeSpan.FromSeconds(seconds);
}
