using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;
using CsCheck;

namespace BenchRunner.Signals.Tests.Analysis;

/// <summary>Whatever codes a scope gives and whatever is stated, there are values or reasons, or the documented
/// refusal.</summary>
public sealed class BrokenCaptureTests
{
    private static readonly AnalysisSettings _settings =
        new() { EveryDefinition = true, IntegrationTime = 50e-9, ForwardVoltage = 1 };

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    [InlineData(2)]
    [InlineData(3)]
    [InlineData(1000)]
    public void Codes_at_a_rail_or_at_rest_give_reasons(int count)
    {
        foreach (short code in (ReadOnlySpan<short>)[short.MinValue, -1, 0, short.MaxValue])
        {
            AnalysisResult result = WaveformAnalysis.Analyse(Capture(_ => Codes(count, _ => code)), _settings);
            Check(result);
            Assert.All(result.Quantities, q => Assert.Null(q.Value));
        }
    }

    [Fact]
    public void Any_codes_at_any_scale_give_values_or_reasons()
    {
        Gen<short[]> garbage = Gen.Short.Array[0, 400];
        Gen<short[]> blocks = Gen.Select(Gen.Short, Gen.Int[1, 300]).Array[1, 12]
            .Select(b => b.SelectMany(x => Enumerable.Repeat(x.Item1, x.Item2)).ToArray());
        Gen<double> scale = Gen.OneOf(
            Gen.Double[-1, 1],
            Gen.OneOf<double>(0, 1e-300, 1e300, double.MaxValue, double.NaN, double.PositiveInfinity));
        Gen.Select(Gen.OneOf(garbage, blocks).Array[8], scale, scale, scale).Sample(
            (codes, increment, origin, reference) =>
            {
                int count = codes.Min(c => c.Length);
                RawTrace[] traces = [.. ChannelNames.All.Select(c => new RawTrace(
                    c, codes[(int)c][..count], 0, 1e-9, increment, origin, reference, -32768, 32767))];
                Check(WaveformAnalysis.Analyse(traces, _settings));
                Check(WaveformAnalysis.Analyse(traces, _settings with
                {
                    Position = DevicePosition.High,
                    Shunt = new Shunt(0.01, 1e-10),
                    Corrections = ChannelNames.All.ToDictionary(
                        c => c, c => new ChannelCorrection(Gain: 1.01, Skew: 0.3e-9)),
                }));
            },
            iter: 300);
    }

    [Fact]
    public void Settings_that_cannot_be_are_refused_as_documented_or_give_reasons()
    {
        Waveform sound = Reference.Waveform("hv650soft-measured.csv.gz");
        Gen<double> any = Gen.OneOf(
            Gen.Double,
            Gen.OneOf<double>(
                0, -1, 1e-9, -1e-9, 1, 1e300, double.MaxValue, double.NaN, double.PositiveInfinity,
                double.NegativeInfinity));
        Gen.Select(any, any, any, Gen.Select(any, any, any), Gen.Select(any, any)).Sample(
            (dead, forward, time, correction, shunt) =>
            {
                AnalysisSettings settings = _settings with
                {
                    DeadTime = dead,
                    ForwardVoltage = forward,
                    IntegrationTime = time,
                    Corrections = new Dictionary<Channel, ChannelCorrection>
                    {
                        [Channel.IdLow] = new(correction.Item1, correction.Item2, correction.Item3),
                    },
                    Shunt = new Shunt(shunt.Item1, shunt.Item2),
                };
                try
                {
                    Check(WaveformAnalysis.Analyse(sound, settings));
                }
                catch (ArgumentException refused)
                {
                    // Named: a gain of 0, a shunt without resistance, something not finite.
                    Assert.Matches("gain|offset|shunt", refused.Message);
                }
            },
            iter: 60);
    }

    [Fact]
    public void A_time_that_is_not_finite_is_refused()
    {
        RawTrace[] traces = Capture(_ => Codes(100, i => (short)i));
        foreach (double bad in (ReadOnlySpan<double>)[double.NaN, double.PositiveInfinity, 0, -1e-9])
        {
            Assert.ThrowsAny<ArgumentException>(() =>
                WaveformAnalysis.Analyse([.. traces.Select(t => t with { SampleInterval = bad })], _settings));
        }

        Assert.ThrowsAny<ArgumentException>(() =>
            WaveformAnalysis.Analyse([.. traces.Select(t => t with { TimeOrigin = double.NaN })], _settings));
    }

    [Fact]
    public void A_sound_capture_after_a_broken_one_says_what_it_says_alone()
    {
        // Arrays are rented: what a broken capture leaves in them is no part of the next.
        Waveform sound = Reference.Waveform("hv650soft-measured.csv.gz");
        AnalysisSettings settings = Reference.Settings("hv650soft", measured: true);
        AnalysisResult expected = WaveformAnalysis.Analyse(sound, settings);
        Dictionary<Channel, double[]> broken = sound.Channels.ToDictionary(
            c => c, c => c == Channel.VgsLow ? sound[c].ToArray() : [.. sound[c].ToArray().Select(_ => double.NaN)]);
        WaveformAnalysis.Analyse(new Waveform(0, 1e-9, broken), settings);
        Assert.Equal(expected.Quantities, WaveformAnalysis.Analyse(sound, settings).Quantities);
    }

    [Theory]
    [Trait("kind", "slow")]
    [InlineData("noise")]
    [InlineData("square")]
    [InlineData("half")]
    public void Ten_million_samples_of_the_worst_kind_end_in_values_or_reasons(string kind)
    {
        const int count = 10_000_000;
        Random random = new(7);
        short Code(Channel channel, int i) => kind switch
        {
            // About 5 million crossings of 50 %.
            "noise" => (short)random.Next(-100, 101),

            // 33,000 pulses, and currents and voltages that move with them.
            "square" => (short)((i / 150 % 2 * 20_000) + (channel == Channel.VgsLow ? 0 : i % 97)),

            // One pulse, then thousands of crossings of 50 % that never come near 90 %.
            _ => (short)((i < count / 3 ? 0 : i < 2 * (count / 3) ? 20_000 : 9000 + (i / 300 % 2 * 2000)) + (i % 5)),
        };
        RawTrace[] traces = Capture(channel => Codes(count, i => Code(channel, i)));
        Check(WaveformAnalysis.Analyse(traces, _settings));
    }

    private static RawTrace[] Capture(Func<Channel, short[]> codes) =>
    [
        .. new[] { Channel.VgsLow, Channel.VdsLow, Channel.IdLow, Channel.VdsHigh }.Select(c => new RawTrace(
            c, codes(c), -1e-6, 1e-9, 0.01, 0, 0, short.MinValue, short.MaxValue)),
    ];

    private static short[] Codes(int count, Func<int, short> of)
    {
        short[] codes = new short[count];
        for (int i = 0; i < count; i++)
        {
            codes[i] = of(i);
        }

        return codes;
    }

    private static void Check(AnalysisResult result) => Assert.All(result.Quantities, q =>
    {
        Assert.True(q.Value is null != q.Reason is null, $"{q}");
        Assert.True(q.Value is null || (double.IsFinite(q.Value.Value) && q.From <= q.To), $"{q}");
    });
}
