using CsCheck;
using FakeBench.Physics;
using FakeBench.Probes;

namespace FakeBench.Tests.Probes;

public sealed class RecorderTests
{
    private static readonly TrainTrajectory Train = HalfBridge.Simulate(
        CircuitParameters.Nominal, new PulseTrain(8.08e-6, 6e-6, 3e-6, 18, -4, 600), -1e-6, 2e-9, 10_000);

    private static readonly CaptureKey Key = new(1, "W1200-0001", 1);

    [Theory]
    [InlineData(8)]
    [InlineData(12)]
    public void A_perfect_probe_gives_the_nearest_code_of_every_sample(int bits)
    {
        var digitiser = new Digitiser(bits, 1000, 400);
        short[] codes = Recorder.Record(Train, new ProbeChannel(Signal.VdsLow), digitiser, Key.Noise(1), 0);

        for (int i = 0; i < codes.Length; i++)
        {
            double error = digitiser.Value(codes[i]) - Train[Signal.VdsLow][i];
            Assert.InRange(error, -0.5001 * digitiser.Step, 0.5001 * digitiser.Step);
        }
    }

    [Fact]
    public void Gain_and_offset_apply_to_what_is_recorded()
    {
        var digitiser = new Digitiser(12, 1000, 400);
        var probe = new ProbeChannel(Signal.VdsLow) { Gain = 1.02, Offset = -3 };
        short[] codes = Recorder.Record(Train, probe, digitiser, Key.Noise(1), 0);

        for (int i = 0; i < codes.Length; i += 13)
        {
            Assert.Equal(1.02 * Train[Signal.VdsLow][i] - 3, digitiser.Value(codes[i]), 0.51 * digitiser.Step);
        }
    }

    [Fact]
    public void What_leaves_the_range_sticks_to_the_rails()
    {
        var digitiser = new Digitiser(8, 400, 200);
        short[] codes = Recorder.Record(Train, new ProbeChannel(Signal.VdsLow), digitiser, Key.Noise(1), 0);

        Assert.Equal(127, codes.Max());
        Assert.Equal(127, digitiser.Highest);
        Assert.Equal(-128, digitiser.Lowest);
        Assert.True(codes.Count(c => c == 127) > 1000);
        Assert.All(codes, c => Assert.InRange(c, digitiser.Lowest, digitiser.Highest));
    }

    [Fact]
    public void Skew_and_jitter_make_an_edge_late_by_their_sum()
    {
        var digitiser = new Digitiser(12, 1000, 400);
        double Edge(ProbeChannel probe, double jitter)
        {
            short[] codes = Recorder.Record(Train, probe, digitiser, Key.Noise(1), jitter);
            int i = Train.Points / 2 - 1500;
            while (digitiser.Value(codes[i]) < 300) i++;
            double below = digitiser.Value(codes[i - 1]);
            return i - 1 + (300 - below) / (digitiser.Value(codes[i]) - below);
        }

        double late = Edge(new ProbeChannel(Signal.VdsLow) { Skew = 3.1e-9 }, 0.4e-9)
            - Edge(new ProbeChannel(Signal.VdsLow), 0);

        Assert.Equal(3.5e-9, late * Train.Interval, 0.05e-9);
    }

    [Fact]
    public void Noise_has_the_stated_deviation_and_does_not_depend_on_the_other_channels()
    {
        var digitiser = new Digitiser(12, 100, 0);
        var probe = new ProbeChannel(Signal.IdHigh) { Noise = 0.5 };
        short[] codes = Recorder.Record(Train, probe, digitiser, Key.Noise(3), 0);
        short[] again = Recorder.Record(Train, probe, digitiser, Key.Noise(3), 0);
        double sum = 0;
        for (int i = 0; i < 400; i++) sum += digitiser.Value(codes[i]) * digitiser.Value(codes[i]);

        Assert.Equal(codes, again);
        Assert.InRange(Math.Sqrt(sum / 400), 0.43, 0.57);
    }

    [Fact]
    public void Coding_is_monotonic_and_ends_at_the_rails() =>
        Gen.Select(Gen.Double[-1e6, 1e6], Gen.Double[-1e6, 1e6], Gen.Bool).Sample((a, b, fine) =>
        {
            var digitiser = new Digitiser(fine ? 12 : 8, 800, 10);
            var (low, high) = (digitiser.Code(Math.Min(a, b)), digitiser.Code(Math.Max(a, b)));
            var codes = new short[2];
            digitiser.Code([a, b], codes);
            bool same = codes.Order().SequenceEqual([low, high]);
            return same && low <= high && low >= digitiser.Lowest && high <= digitiser.Highest;
        });
}
