using BenchRunner.Signals.Comparisons;

namespace BenchRunner.Signals.Tests.Comparisons;

public sealed class FeatureSelectiveTests
{
    /// <summary>Closed form: each difference of a scaled copy is (s − 1)/(s + 1) of its weight, 2 (1/2 + 1/6 + 1/7.2) =
    /// 29/18.</summary>
    [Theory]
    [InlineData(0.5)]
    [InlineData(0.9)]
    [InlineData(1)]
    [InlineData(1.25)]
    [InlineData(3)]
    public void A_scaled_copy_has_the_measures_of_its_scale(double scale)
    {
        double[] reference = Wave(phase: 0);
        double[] copy = [.. reference.Select(x => scale * x)];

        FeatureSelective measures = FeatureSelective.Form(copy, reference)!.Value;

        double part = Math.Abs(scale - 1) / (scale + 1);
        Assert.Equal(29.0 / 18 * part, measures.Feature, 1e-9);
        Assert.Equal(part, measures.Amplitude, 1e-9);
        Assert.InRange(measures.Global, Math.Max(measures.Feature, measures.Amplitude) - 1e-12, 1e9);
    }

    /// <summary>IEEE 1597.1, table of words (from memory).</summary>
    [Theory]
    [InlineData(0, "Excellent")]
    [InlineData(0.1, "Excellent")]
    [InlineData(0.15, "Very good")]
    [InlineData(0.3, "Good")]
    [InlineData(0.6, "Fair")]
    [InlineData(1.2, "Poor")]
    [InlineData(1.7, "Very poor")]
    public void A_measure_has_its_word(double measure, string word) =>
        Assert.Equal(word, FeatureSelective.Word(measure));

    [Fact]
    public void Which_of_the_two_is_the_reference_changes_nothing()
    {
        FeatureSelective one = FeatureSelective.Form(Wave(0), Wave(0.3))!.Value;
        FeatureSelective other = FeatureSelective.Form(Wave(0.3), Wave(0))!.Value;

        Assert.Equal(one.Amplitude, other.Amplitude, 1e-12);
        Assert.Equal(one.Feature, other.Feature, 1e-12);
        Assert.True(one.Feature > 0.01);
    }

    /// <summary>Content in the low and the high part of the spectrum, none in its five slow bins.</summary>
    private static double[] Wave(double phase) =>
    [
        .. Enumerable.Range(0, 900).Select(i => 2 * Math.PI * i / 900).Select(t =>
            Math.Sin((12 * t) + phase) + (0.7 * Math.Cos(31 * t)) + (0.4 * Math.Sin((200 * t) + (2 * phase)))),
    ];
}
