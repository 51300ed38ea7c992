using BenchRunner.Safety.Watches;

namespace BenchRunner.Safety.Tests.Watches;

public sealed class BusWitnessTests
{
    [Fact]
    public void A_bus_that_was_never_charged_needs_no_witness()
    {
        var witness = new BusWitness();

        Assert.False(witness.MayBeEnergised);
        Assert.True(witness.Followed);
    }

    [Fact]
    public void A_voltmeter_that_stays_at_zero_while_the_supply_goes_up_is_not_believed()
    {
        var witness = new BusWitness();
        witness.Commanded(600);
        witness.Saw(0.2);

        Assert.True(witness.MayBeEnergised);
        Assert.False(witness.Followed);
    }

    [Fact]
    public void A_voltmeter_that_followed_the_bus_up_is_believed()
    {
        var witness = new BusWitness();
        witness.Commanded(600);
        witness.Saw(598);

        Assert.True(witness.Followed);
    }

    [Fact]
    public void A_bus_found_charged_counts_as_energised_though_nobody_charged_it()
    {
        var witness = new BusWitness();
        witness.Saw(400);

        Assert.True(witness.MayBeEnergised);
    }

    [Fact]
    public void A_proof_starts_afresh()
    {
        var witness = new BusWitness();
        witness.Commanded(600);
        witness.Saw(600);
        witness.ProvedDown();

        Assert.False(witness.MayBeEnergised);
    }
}
