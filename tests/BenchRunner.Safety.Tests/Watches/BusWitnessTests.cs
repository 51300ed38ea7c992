using BenchRunner.Safety.Tests.Benches;
using BenchRunner.Safety.Watches;
using Microsoft.Extensions.Time.Testing;

namespace BenchRunner.Safety.Tests.Watches;

public sealed class BusWitnessTests
{
    [Fact]
    public void A_bus_that_was_never_charged_needs_no_witness()
    {
        var witness = LiveBench.Witness();

        Assert.False(witness.MayBeEnergised);
        Assert.Null(witness.WhyNot);
    }

    [Fact]
    public void A_voltmeter_that_stays_at_zero_while_the_supply_goes_up_is_not_believed()
    {
        var witness = LiveBench.Witness();
        witness.Commanded(600);
        witness.Saw(0.2, 0);

        Assert.True(witness.MayBeEnergised);
        Assert.NotNull(witness.WhyNot);
    }

    [Fact]
    public void A_voltmeter_that_followed_the_bus_up_is_believed()
    {
        var witness = LiveBench.Witness();
        witness.Commanded(600);
        witness.Saw(598, 0);

        Assert.Null(witness.WhyNot);
    }

    [Fact]
    public void A_bus_found_charged_counts_as_energised_though_nobody_charged_it()
    {
        var witness = LiveBench.Witness();
        witness.Saw(400, 0);

        Assert.True(witness.MayBeEnergised);
    }

    [Fact]
    public void A_proof_starts_afresh()
    {
        var witness = LiveBench.Witness();
        witness.Commanded(600);
        witness.Saw(600, 0);
        witness.ProvedDown();

        Assert.False(witness.MayBeEnergised);
    }

    /// <summary>250 ms of time constant: 200 V fall to 134 V in 100 ms by the bleeder, to 90 V at half the constant.</summary>
    [Theory]
    [InlineData(134, true)]
    [InlineData(95, true)]
    [InlineData(20, false)]
    public void A_fall_is_believed_as_far_as_twice_the_bleeder_explains_it(double volts, bool isBelieved)
    {
        var time = new FakeTimeProvider();
        BusWitness witness = Charged(200, time);
        time.Advance(TimeSpan.FromMilliseconds(100));

        string? wrong = witness.Saw(volts, time.GetTimestamp());

        Assert.Equal(isBelieved, wrong is null);
        Assert.Equal(!isBelieved, witness.IsDoubted);
        Assert.Equal(isBelieved ? volts : 200, witness.LastBelieved);
    }

    [Fact]
    public void What_was_once_disbelieved_stays_so()
    {
        var time = new FakeTimeProvider();
        BusWitness witness = Charged(200, time);
        time.Advance(TimeSpan.FromMilliseconds(10));
        Assert.NotNull(witness.Saw(0, time.GetTimestamp()));
        time.Advance(TimeSpan.FromMilliseconds(10));
        witness.Saw(195, time.GetTimestamp());

        Assert.True(witness.IsDoubted);
        Assert.Contains("fuse or lead", witness.WhyNot, StringComparison.Ordinal);
    }

    [Fact]
    public void A_fall_by_a_train_is_no_reason_to_trip_and_no_proof_either()
    {
        var time = new FakeTimeProvider();
        BusWitness witness = Charged(200, time);
        time.Advance(TimeSpan.FromMilliseconds(1));
        witness.Firing();
        time.Advance(TimeSpan.FromMilliseconds(1));
        witness.Fired();
        time.Advance(TimeSpan.FromMilliseconds(1));

        Assert.Null(witness.Saw(0, time.GetTimestamp()));
        Assert.Contains("after a train", witness.WhyNot, StringComparison.Ordinal);
    }

    /// <summary>Two links to one voltmeter: a reading asked for before the believed one had come may be older.</summary>
    [Fact]
    public void A_low_reading_that_may_be_an_older_one_is_undecided_until_the_next()
    {
        var time = new FakeTimeProvider();
        BusWitness witness = LiveBench.Witness(time: time);
        witness.Commanded(200);
        long before = time.GetTimestamp();
        time.Advance(TimeSpan.FromMilliseconds(5));
        witness.Saw(200, time.GetTimestamp());

        Assert.Null(witness.Saw(70, before));
        Assert.True(witness.IsUndecided);
        Assert.False(witness.IsDoubted);
        time.Advance(TimeSpan.FromMilliseconds(5));
        Assert.Null(witness.Saw(199, time.GetTimestamp()));
        Assert.False(witness.IsUndecided);
    }

    [Fact]
    public void A_proof_does_not_make_a_doubted_voltmeter_believed()
    {
        var time = new FakeTimeProvider();
        BusWitness witness = Charged(200, time);
        time.Advance(TimeSpan.FromMilliseconds(10));
        witness.Saw(0, time.GetTimestamp());
        witness.ProvedDown();

        Assert.True(witness.IsDoubted);
    }

    private static BusWitness Charged(double volts, FakeTimeProvider time)
    {
        BusWitness witness = LiveBench.Witness(time: time);
        witness.Commanded(volts);
        witness.Saw(volts, time.GetTimestamp());
        return witness;
    }
}
