using System.Numerics;
using BenchRunner.Signals.Edges;
using BenchRunner.Signals.Levels;
using BenchRunner.Signals.LoadCurrent;
using BenchRunner.Signals.Traces;
using CsCheck;

namespace BenchRunner.Signals.Tests.Traces;

/// <summary>Kernels over ADC codes against the same kernels over their values, and against whole numbers of any
/// length.</summary>
public sealed class SamplesTests
{
    private static readonly Gen<short> _code = Gen.OneOf(
        Gen.Short, Gen.OneOf<short>(short.MinValue, short.MaxValue, 0, -1), Gen.Int[-8, 8].Select(code => (short)code));

    private static readonly Gen<double> _gain = Gen.OneOf(Gen.Double[1e-6, 10], Gen.Double[-10, -1e-6]);

    [Fact]
    public void Sums_of_codes_are_exact() =>
        Gen.Select(_code.Array[2, 3000], Gen.Int[0, 2999], Gen.Int[0, 2999]).Sample((codes, a, b) =>
        {
            int from = Math.Min(Math.Min(a, b), codes.Length - 1), to = Math.Min(Math.Max(a, b), codes.Length - 1);
            short[] other = [.. codes.Reverse()];
            BigInteger sum = 0, product = 0;
            for (int i = from; i < to; i++)
            {
                sum += codes[i] + codes[i + 1];
                product += (codes[i] * other[i]) + ((BigInteger)codes[i + 1] * other[i + 1]);
            }

            Samples x = Samples.Of(codes, 1, 0), y = Samples.Of(other, 1, 0);
            Assert.Equal((double)sum / 2, Integral.Of(x, from, to));
            Assert.Equal((double)product / 2, Integral.OfProduct(x, y, from, to));
        });

    [Fact]
    public void A_million_samples_at_the_rail_do_not_overflow()
    {
        short[] rail = new short[1_000_003];
        Array.Fill(rail, short.MinValue);
        Samples samples = Samples.Of(rail, 2, 1);
        double value = (2.0 * short.MinValue) + 1;
        Assert.Equal(value, Integral.Mean(samples, 0, rail.Length - 1), 1e-12 * -value);
        double product = Integral.OfProduct(samples, samples, 0, rail.Length - 1) / (rail.Length - 1);
        Assert.Equal(value * value, product, 1e-12 * value * value);
        Line line = Line.Fit(samples, 0, rail.Length - 1)!.Value;
        Assert.Equal((value, 0), (line.Value, line.Slope));
    }

    [Fact]
    public void A_crossing_among_codes_is_the_crossing_among_values() =>
        Gen.Select(
            _code.Array[2, 400], _gain, Gen.Double[-100, 100], Gen.Double[-1.1, 1.1], Gen.Double[0, 0.2], Gen.Bool)
            .Sample((codes, gain, offset, part, back, rises) =>
            {
                Samples samples = Samples.Of(codes, gain, offset);
                // On a code's own value as often as between two.
                double level = part > 0.5 ? samples[codes.Length / 2] : samples.Value((int)(part * short.MaxValue));
                double hysteresis = part > 0 ? Math.Abs(back * gain * short.MaxValue) : 0;
                CrossingDirection direction = rises ? CrossingDirection.Rising : CrossingDirection.Falling;
                Assert.Equal(
                    Crossing.First(samples.Values, level, hysteresis, direction, 0, codes.Length - 1),
                    Crossing.First(samples, level, hysteresis, direction, 0, codes.Length - 1));
                CrossingScan byCodes = new(samples, level, hysteresis, 0, codes.Length - 1);
                CrossingScan byValues = new(samples.Values, level, hysteresis, 0, codes.Length - 1);
                while (byValues.Next())
                {
                    Assert.True(byCodes.Next());
                    Assert.Equal((byValues.Position, byValues.Direction), (byCodes.Position, byCodes.Direction));
                }

                Assert.False(byCodes.Next());
            });

    [Fact]
    public void Noise_levels_and_lines_of_codes_are_those_of_their_values() =>
        Gen.Select(
            Gen.Int[2, 900], Gen.Int[0, 30_000], Gen.Int[0, 2000], _gain, Gen.Double[-100, 100], Gen.Int[1, 3])
            .Sample((length, swing, noise, gain, offset, stride) =>
            {
                Random random = new(length + swing);
                short[] codes =
                [
                    .. Enumerable.Range(0, length)
                        .Select(i => (short)((i > length / 2 ? swing : 0) + random.Next(-noise, noise + 1))),
                ];
                Samples samples = Samples.Of(codes, gain, offset);
                double step = Math.Abs(gain), scale = Math.Abs(offset) + (Math.Abs(gain) * short.MaxValue);
                double sigma = Noise.Sigma(samples.Values, step, stride);
                Assert.Equal(sigma, Noise.Sigma(samples, step, stride), 1e-13 * scale);
                Same(
                    HistogramLevels.Find(samples.Values, sigma, step),
                    HistogramLevels.Find(samples, sigma, step),
                    scale);
                Line? expected = Line.Fit(samples.Values, 0, length - 1), line = Line.Fit(samples, 0, length - 1);
                Assert.Equal(expected is null, line is null);
                Assert.Equal(expected?.Value ?? 0, line?.Value ?? 0, 1e-13 * scale);
                Assert.Equal(expected?.Slope ?? 0, line?.Slope ?? 0, 1e-13 * scale);
            });

    private static void Same(TwoLevels? expected, TwoLevels? found, double scale)
    {
        Assert.Equal(expected is null, found is null);
        Assert.Equal(expected?.Low ?? 0, found?.Low ?? 0, 1e-13 * scale);
        Assert.Equal(expected?.High ?? 0, found?.High ?? 0, 1e-13 * scale);
    }
}
