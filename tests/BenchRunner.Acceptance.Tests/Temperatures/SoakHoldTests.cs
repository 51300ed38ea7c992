using BenchRunner.Acceptance.Temperatures;

namespace BenchRunner.Acceptance.Tests.Temperatures;

/// <summary>When a plate is at rest at its temperature. Time is what the test says.</summary>
public sealed class SoakHoldTests
{
    private const double Target = 125;
    private const double Tolerance = 3;
    private const double Soak = 120;

    [Fact]
    public void It_is_done_when_the_soak_has_passed_within_tolerance_and_no_earlier()
    {
        SoakHold hold = new(Target, Tolerance, Soak);
        for (double at = 0; at < Soak; at += 0.5)
        {
            hold.Saw(at, Target + 1);
            Assert.False(hold.IsDone);
            Assert.Equal(Soak - at, hold.Left, 9);
        }

        hold.Saw(Soak, Target + 1);
        Assert.True(hold.IsDone);
        Assert.Equal(0, hold.Left);
    }

    [Fact]
    public void One_reading_outside_begins_the_soak_again()
    {
        SoakHold hold = new(Target, Tolerance, Soak);
        hold.Saw(0, Target);
        hold.Saw(119, Target + 3.1);
        Assert.Equal(Soak, hold.Left);
        hold.Saw(119.5, Target);
        hold.Saw(121, Target);
        Assert.False(hold.IsDone);
        for (double at = 122; at <= 240; at++)
        {
            hold.Saw(at, Target);
        }

        Assert.True(hold.IsDone);
    }

    [Theory]
    [InlineData(0.49, true)]
    [InlineData(0.51, false)]
    public void A_plate_that_still_moves_by_half_a_kelvin_a_minute_is_not_at_rest(double perMinute, bool done)
    {
        SoakHold hold = new(Target, Tolerance, Soak);
        for (double at = 0; at <= 180; at++)
        {
            hold.Saw(at, Target - 2 + (perMinute * at / 60));
        }

        Assert.Equal(done, hold.IsDone);
    }

    [Fact]
    public void A_reading_that_is_no_number_is_outside()
    {
        SoakHold hold = new(Target, Tolerance, 0);
        hold.Saw(0, double.NaN);
        Assert.False(hold.IsDone);
        hold.Saw(1, Target);
        Assert.True(hold.IsDone);
    }
}
