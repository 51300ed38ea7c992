using BenchRunner.Signals.Edges;
using CsCheck;

namespace BenchRunner.Signals.Tests.Edges;

public sealed class CrossingTests
{
    private static readonly Gen<(double[] Samples, double Level, double Hysteresis)> _signals =
        Gen.Select(Gen.Double[-10, 10].Array[2, 200], Gen.Double[-10, 10], Gen.Double[0, 3]);

    [Fact]
    public void A_crossing_is_interpolated_between_the_samples_that_straddle_it() =>
        Assert.Equal(1.5, Crossing.First([0, 1, 3], 2, 0, CrossingDirection.Rising, 0, 2));

    [Fact]
    public void A_signal_that_turns_back_inside_the_hysteresis_crosses_when_it_comes_again() =>
        Assert.Equal(3.25, Crossing.First([0, 2.1, 0, 1.5, 3.5], 2, 0.5, CrossingDirection.Rising, 0, 4));

    [Fact]
    public void Noise_on_the_level_counts_at_its_last_crossing_before_the_hysteresis() =>
        Assert.Equal(2.5, Crossing.First([-1, 0.2, -0.2, 0.2, 2], 0, 1, CrossingDirection.Rising, 0, 4));

    [Fact]
    public void A_signal_that_rests_on_the_level_crosses_where_it_leaves_it() =>
        Assert.Equal(2, Crossing.First([0, 0, 0, 1], 0, 0.5, CrossingDirection.Rising, 0, 3));

    [Fact]
    public void A_signal_that_stays_on_one_side_has_no_crossing() =>
        Assert.Null(Crossing.First([0, 1, 1.9], 2, 0, CrossingDirection.Rising, 0, 2));

    [Fact]
    public void A_crossing_before_the_interval_does_not_count() =>
        Assert.Equal(4.5, Crossing.First([0, 1, 1, 0, 0, 1, 1], 0.5, 0.1, CrossingDirection.Rising, 1, 6));

    /// <summary>The definition, sample by sample: the last straddle before the signal is beyond by the
    /// hysteresis.</summary>
    [Fact]
    public void Searching_many_samples_a_step_finds_what_the_definition_says() =>
        Gen.Select(Gen.Int[-4, 4].Select(x => (double)x).Array[2, 60], Gen.Int[-4, 4], Gen.Int[0, 3], Gen.Int[0, 20])
            .Sample((samples, level, hysteresis, from) =>
            {
                double? expected = null;
                double straddle = double.NaN;
                for (int i = from + 1; i < samples.Length && expected is null; i++)
                {
                    if (samples[i - 1] <= level && samples[i] > level)
                    {
                        straddle = i - 1 + ((level - samples[i - 1]) / (samples[i] - samples[i - 1]));
                    }

                    expected = samples[i] >= level + hysteresis && straddle >= from ? straddle : null;
                }

                Assert.Equal(
                    expected,
                    Crossing.First(samples, level, hysteresis, CrossingDirection.Rising, from, samples.Length - 1));
            });

    [Fact]
    public void The_negated_signal_falls_where_the_signal_rises() =>
        _signals.Sample((samples, level, hysteresis) =>
            Assert.Equal(
                Crossing.First(samples, level, hysteresis, CrossingDirection.Rising, 0, samples.Length - 1),
                Crossing.First(
                    [.. samples.Select(x => -x)],
                    -level,
                    hysteresis,
                    CrossingDirection.Falling,
                    0,
                    samples.Length - 1)));

    [Fact]
    public void The_walk_finds_the_first_crossing_that_the_search_finds() =>
        _signals.Sample((samples, level, hysteresis) =>
        {
            CrossingScan scan = new(samples, level, hysteresis, 0, samples.Length - 1);
            double? first = null;
            while (first is null && scan.Next())
            {
                first = scan.Direction == CrossingDirection.Rising ? scan.Position : null;
            }

            double? found = Crossing.First(samples, level, hysteresis, CrossingDirection.Rising, 0, samples.Length - 1);
            if (samples[0] <= level)
            {
                Assert.Equal(found, first);
            }
        });
}
