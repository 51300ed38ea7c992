using BenchRunner.Safety.Tests.Benches;

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
}
