using FakeBench.Probes;
using FakeBench.Tests.Physics;

namespace FakeBench.Tests.Probes;

public sealed class GaussianNoiseTests
{
    private static readonly double[] Noise = Draw(new CaptureKey(1, "W1200-0001", 3).Noise(2), 200_000);

    [Fact]
    public void Mean_deviation_and_tails_are_those_of_a_normal()
    {
        double mean = Noise.Average();
        double deviation = Math.Sqrt(Noise.Average(v => v * v));

        Assert.InRange(mean, -0.02, 0.02);
        Approximately.Equal(2, deviation, 0.01);
        // Shares beyond one, two and three deviations: tables of the normal distribution.
        Approximately.Equal(0.3173, Share(1), 0.02);
        Approximately.Equal(0.0455, Share(2), 0.05);
        Approximately.Equal(0.0027, Share(3), 0.2);
        Assert.All(Noise, v => Assert.InRange(v, -4.8 * 2, 4.8 * 2));
    }

    [Fact]
    public void Neighbouring_samples_have_nothing_to_do_with_each_other()
    {
        for (int lag = 1; lag <= 5; lag++)
        {
            double sum = 0;
            for (int i = lag; i < Noise.Length; i++) sum += Noise[i] * Noise[i - lag];
            // The deviation of such a mean is sigma²/sqrt(n) = 0.009; five of them.
            Assert.InRange(sum / Noise.Length, -0.045, 0.045);
        }
    }

    [Fact]
    public void The_key_decides_everything()
    {
        var key = new CaptureKey(1, "W1200-0001", 3);
        var first = Draw(key.Noise(1), 1000);

        Assert.Equal(first, Draw(key.Noise(1), 1000));
        Assert.Equal(first.Take(998), Draw(key.Noise(1), 998));
        Assert.NotEqual(first, Draw(key.Noise(2), 1000));
        Assert.NotEqual(first, Draw((key with { Fire = 4 }).Noise(1), 1000));
        Assert.NotEqual(first, Draw((key with { Seed = 2 }).Noise(1), 1000));
        Assert.NotEqual(first, Draw((key with { Serial = "W1200-0002" }).Noise(1), 1000));
    }

    [Fact]
    public void Jitter_has_its_deviation_over_many_fires()
    {
        var jitter = Enumerable.Range(0, 4000).Select(i => new CaptureKey(1, "W1200-0001", i).Jitter(50e-12)).ToList();

        Approximately.Equal(50e-12, Math.Sqrt(jitter.Average(j => j * j)), 0.05);
        Assert.Equal(0, new CaptureKey(1, "W1200-0001", 1).Jitter(0));
    }

    private static double Share(double deviations) =>
        Noise.Count(v => Math.Abs(v) > 2 * deviations) / (double)Noise.Length;

    private static double[] Draw(ulong key, int count)
    {
        var samples = new double[count];
        GaussianNoise.Add(samples, 2, key);
        return samples;
    }
}
