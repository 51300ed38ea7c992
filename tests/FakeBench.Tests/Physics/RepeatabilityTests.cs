using CsCheck;
using FakeBench.Physics;
using FakeBench.Population;

namespace FakeBench.Tests.Physics;

/// <summary>Equal inputs give equal bits, nearly equal inputs nearly equal waveforms, small steps the same as large
/// ones.</summary>
public sealed class RepeatabilityTests
{
    private static readonly PulseTrain Rated = new(8.08e-6, 6e-6, 3e-6, 18, -4, 600);

    [Fact]
    public void The_same_train_gives_the_same_bits_on_any_thread()
    {
        var first = HalfBridge.Simulate(CircuitParameters.Nominal, Rated, -1e-6, 2e-9, 10_000);
        var again = new TrainTrajectory[4];
        Parallel.For(0, again.Length, i =>
            again[i] = HalfBridge.Simulate(CircuitParameters.Nominal, Rated, -1e-6, 2e-9, 10_000));

        foreach (var other in again)
        {
            Assert.Equal(first.End, other.End);
            for (int s = 0; s < first.Signals.Length; s++) Assert.Equal(first.Signals[s], other.Signals[s]);
        }
    }

    [Theory]
    [InlineData(600, 8.08e-6)]
    [InlineData(400, 6.05e-6)]
    [InlineData(60, 8.08e-6)]
    public void Default_tolerance_lies_within_half_a_percent_of_the_limit_of_small_steps(double bus, double width)
    {
        var train = Rated with { BusVoltage = bus, FirstPulse = width };
        var usual = HalfBridge.Simulate(CircuitParameters.Nominal, train, -1e-6, 1e-9, 20_000);
        var fine = HalfBridge.Simulate(CircuitParameters.Nominal, train, -1e-6, 1e-9, 20_000, 1e-7);

        // A wrong slope in the Jacobian shows as rejected and shortened steps.
        Assert.InRange(usual.Steps, 500, 1300);
        Assert.True(fine.Steps > 4 * usual.Steps);
        for (int s = 0; s < usual.Signals.Length; s++)
        {
            double span = fine.Signals[s].Max() - fine.Signals[s].Min();
            double worst = usual.Signals[s].Zip(fine.Signals[s], (a, b) => Math.Abs(a - b)).Max();
            Assert.True(worst < 0.0025 * span, $"{(Signal)s}: {worst} of {span}.");
        }
    }

    [Fact]
    public void A_unit_in_the_last_place_of_a_parameter_moves_no_sample_by_more_than_a_millivolt()
    {
        var nominal = CircuitParameters.Nominal;
        var other = nominal with
        {
            Bench = nominal.Bench with { LoadInductance = Math.BitIncrement(nominal.Bench.LoadInductance) },
        };
        var a = HalfBridge.Simulate(nominal, Rated, -1e-6, 2e-9, 10_000);
        var b = HalfBridge.Simulate(other, Rated, -1e-6, 2e-9, 10_000);

        double worst = a[Signal.VdsHigh].Zip(b[Signal.VdsHigh], (x, y) => Math.Abs(x - y)).Max();
        Assert.InRange(worst, 0, 1e-3);
    }

    [Fact]
    public void The_grid_of_samples_does_not_change_the_solution()
    {
        var coarse = HalfBridge.Simulate(CircuitParameters.Nominal, Rated, -1e-6, 2e-9, 10_000);
        var fine = HalfBridge.Simulate(CircuitParameters.Nominal, Rated, -1e-6, 1e-9, 20_000);

        Assert.Equal(coarse.End, fine.End with { At = coarse.End.At });
        for (int i = 0; i < coarse.Points; i++)
        {
            Assert.Equal(coarse[Signal.VdsLow][i], fine[Signal.VdsLow][2 * i], 1e-6);
        }
    }

    [Fact]
    public void Any_sound_device_can_be_fired_at_any_point_inside_the_benchs_envelope() =>
        Gen.Select(Gen.Int[0, 9999], Gen.Double[20, 900], Gen.Double[0.5e-6, 9e-6], Gen.Double[1e-6, 6e-6])
            .Sample((serial, bus, width, gap) =>
            {
                var parts = DevicePopulation.Draw($"W1200-{serial:d4}", 1).On(new BenchParts());
                var train = new PulseTrain(width, gap, 2e-6, 18, -4, bus);
                var t = HalfBridge.Simulate(parts, train, -1e-6, 10e-9, 2000);
                return t.Signals.All(row => row.All(double.IsFinite))
                    && t.End.BankVoltageAfter > 0.9 * bus
                    && t.End.BankVoltageAfter < bus
                    && t.Steps < 5000;
            }, iter: 60);
}
