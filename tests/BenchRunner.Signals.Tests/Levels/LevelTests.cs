using BenchRunner.Signals.Levels;
using CsCheck;

namespace BenchRunner.Signals.Tests.Levels;

public sealed class LevelTests
{
    [Fact]
    public void The_median_is_the_middle_of_the_sorted_numbers() =>
        Gen.Double[-5, 5].Array[1, 100].Sample(values =>
        {
            double[] sorted = [.. values.Order()];
            double expected = (sorted[(values.Length - 1) / 2] + sorted[values.Length / 2]) / 2;
            Assert.Equal(expected, Median.Of(values), 14);
        });

    [Fact]
    public void Sigma_of_normal_noise_on_a_ramp_is_its_standard_deviation()
    {
        // 20,000 draws: the standard error of a MAD is about 0.8 %.
        Random random = new(1);
        double[] samples = new double[20_000];
        for (int i = 0; i < samples.Length; i++)
        {
            double u = 1 - random.NextDouble();
            samples[i] = (0.01 * i) + (3 * Math.Sqrt(-2 * Math.Log(u)) * Math.Cos(2 * Math.PI * random.NextDouble()));
        }

        Assert.InRange(Noise.Sigma(samples, 0), 3 * 0.96, 3 * 1.04);
    }

    [Fact]
    public void Sigma_of_codes_that_repeat_is_the_quantisation_noise() =>
        Assert.Equal(0.5 / Math.Sqrt(12), Noise.Sigma([1, 1, 1, 1, 1.5, 1, 1, 1, 1, 1], 0.5), 15);

    [Fact]
    public void Levels_are_the_states_and_not_the_overshoot()
    {
        double[] gate = new double[1000];
        for (int i = 0; i < gate.Length; i++)
        {
            gate[i] = i < 500 ? 10 : -2 - (6 * Math.Exp(-(i - 500) / 20.0) * Math.Cos((i - 500) / 4.0));
        }

        TwoLevels levels = HistogramLevels.Find(gate, 0.001, 0)!.Value;
        Assert.Equal(10, levels.High, 12);
        Assert.Equal(-2, levels.Low, 2);
    }

    [Fact]
    public void A_signal_of_noise_alone_has_no_two_levels()
    {
        Random random = new(2);
        double[] noise = [.. Enumerable.Range(0, 1000).Select(_ => random.NextDouble())];
        Assert.Null(HistogramLevels.Find(noise, Noise.Sigma(noise, 0), 0));
        Assert.Null(HistogramLevels.Find(new double[100], 0, 0));
        Assert.Null(HistogramLevels.Find([], 0, 0));
    }

    [Fact]
    public void The_step_of_codes_in_the_upper_half_of_a_word_is_256()
    {
        Assert.Equal(256, SmallestStep.OfCodes([-32768, -256, 0, 512, 512]));
        Assert.Equal(1, SmallestStep.OfCodes([5, 5, 5]));
        Assert.Equal(65535, SmallestStep.OfCodes([short.MinValue, short.MaxValue]));
    }

    [Fact]
    public void The_step_of_values_is_the_least_distance_of_two_that_differ()
    {
        Assert.Equal(0.25, SmallestStep.OfValues([1, 3, 1, 1.25, double.NaN, double.PositiveInfinity]));
        Assert.Equal(0, SmallestStep.OfValues([7, 7, 7]));
    }
}
