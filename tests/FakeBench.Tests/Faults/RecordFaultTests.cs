using FakeBench.Faults;
using FakeBench.Tests.Instruments;
using static FakeBench.Tests.Faults.TwinBenches;

namespace FakeBench.Tests.Faults;

/// <summary>Faults of probes and scope: the record alone is wrong, in the channel that <c>faults</c> names.</summary>
public sealed class RecordFaultTests
{
    [Fact]
    public void A_short_record_lacks_half_of_the_last_input_in_one_train()
    {
        TwinBenches benches = With("short-record@fire:2").Fire();
        Assert.Empty(benches.Differing());
        benches.Fire();
        Assert.Equal((9000, 4500), (benches.Faulty.Preamble(5)[0], benches.Faulty.Preamble(6)[0]));
        Assert.Equal(benches.Sound.Codes(6)[..4500], benches.Faulty.Codes(6));
        Assert.Equal([6], benches.Differing());
        Assert.Empty(benches.Fire().Differing());
    }

    [Fact]
    public void A_weak_signal_has_an_eighth_of_the_swing_in_one_train()
    {
        TwinBenches benches = With("weak-signal@fire:2").Fire().Fire();

        Assert.Equal([VdsHigh], benches.Differing());
        Assert.Equal(Swing(benches.Sound) / 8, Swing(benches.Faulty), 2.0);
        Assert.Empty(benches.Fire().Differing());

        double Swing(TestBench bench) => bench.Values(VdsHigh).Max() - bench.Values(VdsHigh).Min();
    }

    [Fact]
    public void A_noisy_probe_is_quiet_below_100_V_and_then_has_30_V()
    {
        TwinBenches low = With("noisy-probe", 48).Fire();
        Assert.Empty(low.Differing());
        TwinBenches benches = With("noisy-probe").Fire();
        Assert.Equal([VdsHigh], benches.Differing());
        double[] flat = benches.Faulty.Values(VdsHigh)[..450];
        double mean = flat.Average();

        // The deviation of 450 samples of white noise, low-passed at 500 MHz or not, is good to 3 %.
        Assert.Equal(30, Math.Sqrt(flat.Sum(v => (v - mean) * (v - mean)) / flat.Length), 3.5);
    }

    [Fact]
    public void A_drifting_current_probe_gains_an_offset_until_it_is_degaussed()
    {
        TwinBenches benches = With("probe-drift@fire:2").Fire();
        Assert.Empty(benches.Differing());
        benches.Fire().Fire();
        Assert.Equal([Id], benches.Differing());
        Assert.Equal(FaultCatalogue.OffsetStep, Offset(), 0.005);
        TestBench.Say(benches.Faulty.Scope, "INP2:DEG");
        benches.Fire();
        Assert.Equal(FaultCatalogue.OffsetStep, Offset(), 0.005);
        TestBench.Say(benches.Faulty.Scope, "INPut3:DEGauss");
        Assert.Empty(benches.Fire().Differing());

        double Offset() => benches.Faulty.Values(Id).Zip(benches.Sound.Values(Id), (a, b) => a - b).Average();
    }

    [Fact]
    public void A_probes_factor_changes_after_a_train_and_can_be_asked_back()
    {
        TwinBenches benches = With("probe-factor-changes@fire:2").Fire();
        Assert.Equal("1.0E+00", TestBench.Ask(benches.Faulty.Scope, "INP3:ATT?"));
        Assert.Empty(benches.Fire().Differing());
        Assert.Equal("1.0E+01;1.0E+02", TestBench.Ask(benches.Faulty.Scope, "INP3:ATT?;:INP2:ATT?"));
        TestBench.Say(benches.Faulty.Scope, "INP3:ATT 1");
        Assert.Empty(benches.Fire().Differing());
    }
}
