using System.Numerics;
using System.Text.Json;
using BenchRunner.Signals.Comparisons;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Comparisons;

/// <summary>Spectra against numpy's (tests/reference/spectra).</summary>
public sealed class SpectrumTests
{
    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    public void A_spectrum_is_that_of_a_general_purpose_library(int which)
    {
        using JsonDocument file = Reference.Json("spectra/fft.json");
        JsonElement wanted = file.RootElement[which];
        Channel channel = ChannelNames.Parse(wanted.GetProperty("channel").GetString()!)!.Value;
        ReadOnlySpan<double> samples = Reference.Waveform(wanted.GetProperty("file").GetString()!)[channel]
            .Slice(wanted.GetProperty("from").GetInt32(), wanted.GetProperty("count").GetInt32());

        Complex[] spectrum = Spectrum.Of(samples);

        Complex[] bins =
        [
            .. wanted.GetProperty("real").EnumerateArray().Zip(
                wanted.GetProperty("imag").EnumerateArray(), (re, im) => new Complex(re.GetDouble(), im.GetDouble())),
        ];
        double largest = bins.Max(bin => bin.Magnitude);
        Assert.Equal((samples.Length / 2) + 1, bins.Length);
        for (int k = 0; k < bins.Length; k++)
        {
            Assert.True((spectrum[k] - bins[k]).Magnitude < 1e-12 * largest, $"bin {k}: {spectrum[k]}, not {bins[k]}");
        }
    }

    [Theory]
    [InlineData(1)]
    [InlineData(2)]
    [InlineData(97)]
    [InlineData(256)]
    public void A_spectrum_taken_back_is_the_samples(int count)
    {
        double[] samples = [.. Enumerable.Range(0, count).Select(i => Math.Sin(i * i) + 3)];

        double[] back = Spectrum.Back(Spectrum.Of(samples));

        Assert.All(samples.Zip(back), pair => Assert.Equal(pair.First, pair.Second, 1e-12));
    }
}
