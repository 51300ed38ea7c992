using BenchRunner.Signals.Peaks;
using CsCheck;

namespace BenchRunner.Signals.Tests.Peaks;

public sealed class ExtremesTests
{
    [Fact]
    public void Maxima_that_do_not_stand_out_are_passed_over() =>
        Assert.Equal([2, 6], Walk([0, 3, 5, 4.8, 4.9, 1, 4, 0], 2, minima: false));

    [Fact]
    public void A_maximum_at_the_border_is_none() => Assert.Empty(Walk([5, 4, 0, 1, 5], 2, minima: false));

    [Fact]
    public void The_minima_are_the_maxima_of_the_negated_signal() =>
        Gen.Double[-5, 5].Array[1, 200].Select(Gen.Double[0.1, 3]).Sample((samples, prominence) => Assert.Equal(
            Walk([.. samples.Select(x => -x)], prominence, minima: false), Walk(samples, prominence, minima: true)));

    /// <summary>Topographic prominence by its own definition: how far one must go down from a maximum on the way to
    /// anything higher, on both sides, the record's border being as good as something higher. Of equal ones the first.
    /// </summary>
    [Fact]
    public void A_maximum_counts_when_its_prominence_reaches_the_bound() =>
        Gen.Double[-5, 5].Array[1, 120].Select(Gen.Double[0.1, 4]).Sample((samples, bound) =>
        {
            int[] expected = [.. Enumerable.Range(0, samples.Length).Where(i => Prominence(samples, i) >= bound)];
            Assert.Equal(expected, Walk(samples, bound, minima: false));
        });

    private static double Prominence(double[] x, int at)
    {
        double Side(int step)
        {
            double low = x[at];
            for (int i = at + step; i >= 0 && i < x.Length && (x[i] < x[at] || (step > 0 && x[i] == x[at])); i += step)
            {
                low = Math.Min(low, x[i]);
            }

            return x[at] - low;
        }

        return Math.Min(Side(-1), Side(1));
    }

    private static List<int> Walk(double[] samples, double prominence, bool minima)
    {
        List<int> found = [];
        Extremes walk = new(samples, prominence, minima, 0, samples.Length - 1);
        while (walk.Next())
        {
            found.Add(walk.Sample);
        }

        return found;
    }
}
