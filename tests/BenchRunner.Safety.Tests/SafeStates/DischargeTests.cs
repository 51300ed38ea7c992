using BenchRunner.Safety.SafeStates;
using CsCheck;

namespace BenchRunner.Safety.Tests.SafeStates;

public sealed class DischargeTests
{
    [Fact]
    public void Six_hundred_volts_through_25_kilohm_and_50_microfarad_take_ln_10_time_constants_to_60()
    {
        // V(t) = V0 e^(-t/RC): 25 kOhm * 50 uF = 1.25 s; ln(600/60) = 2.302585 (any table of logarithms).
        var discharge = new Discharge(25e3, 50e-6);

        Assert.Equal(1.25, discharge.TimeConstant, 1e-12);
        Assert.Equal(2.8782313662, discharge.TimeTo(600, 60), 1e-9);
    }

    [Fact]
    public void A_bus_that_is_down_needs_no_time() => Assert.Equal(0, new Discharge(25e3, 50e-6).TimeTo(40, 60));

    [Fact]
    public void Two_steps_take_as_long_as_one() =>
        Gen.Double[100, 1000].Select(Gen.Double[61, 99], (from, between) => (from, between)).Sample(pair =>
        {
            var discharge = new Discharge(5e3, 50e-6);
            double steps = discharge.TimeTo(pair.from, pair.between) + discharge.TimeTo(pair.between, 60);
            Assert.Equal(discharge.TimeTo(pair.from, 60), steps, 1e-12);
        });
}
