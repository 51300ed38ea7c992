using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;
using CsCheck;

namespace BenchRunner.Signals.Tests.Analysis;

/// <summary>What must hold for any waveform.</summary>
public sealed class PropertyTests
{
    private static readonly Waveform _clean = Reference.Waveform("hv650soft-clean.csv.gz");
    private static readonly AnalysisSettings _settings = Reference.Settings("hv650soft", measured: false);
    private static readonly AnalysisResult _expected = WaveformAnalysis.Analyse(_clean, _settings);

    [Fact]
    public void A_shift_in_time_moves_the_intervals_and_no_value() =>
        Gen.Double[-1e-3, 1e-3].Sample(
            shift =>
            {
                AnalysisResult shifted = WaveformAnalysis.Analyse(
                    new Waveform(_clean.TimeOrigin + shift, _clean.SampleInterval, Channels(_clean, 1, 1)), _settings);
                Each(shifted, (was, now) =>
                {
                    Assert.Equal(was.Value, now.Value);
                    Near(was.From + shift, now.From, Math.Max(Math.Abs(shift), 1e-5) * 1e-12 / 1e-5);
                });
            },
            iter: 5);

    [Fact]
    public void Scaling_voltages_and_currents_scales_each_quantity_by_its_dimension() =>
        Gen.Select(Gen.Double[0.1, 10], Gen.Double[0.1, 10]).Sample(
            (volts, amperes) =>
            {
                AnalysisSettings settings = _settings with
                {
                    ForwardVoltage = _settings.ForwardVoltage * volts,
                    Shunt = _settings.Shunt! with { Resistance = _settings.Shunt.Resistance * volts / amperes },
                };
                AnalysisResult scaled = WaveformAnalysis.Analyse(
                    new Waveform(_clean.TimeOrigin, _clean.SampleInterval, Channels(_clean, volts, amperes)), settings);
                Each(scaled, (was, now) =>
                {
                    double factor = was.Unit switch
                    {
                        "V" or "V/s" => volts,
                        "A" or "A/s" or "C" => amperes,
                        "J" => volts * amperes,
                        "H" => volts / amperes,
                        _ => 1,
                    };
                    Near(was.Value * factor, now.Value, 1e-6);
                });
            },
            iter: 10);

    [Fact]
    public void Another_order_of_the_channels_changes_nothing()
    {
        Dictionary<Channel, double[]> reversed = new(Channels(_clean, 1, 1).Reverse());
        AnalysisResult result = WaveformAnalysis.Analyse(
            new Waveform(_clean.TimeOrigin, _clean.SampleInterval, reversed), _settings);
        Assert.Equal(_expected.Quantities, result.Quantities);
    }

    [Fact]
    public void The_same_waveform_gives_the_same_bits_on_every_thread()
    {
        AnalysisResult[] results = new AnalysisResult[4];
        Parallel.For(0, results.Length, i => results[i] = WaveformAnalysis.Analyse(_clean, _settings));
        Assert.All(results, result => Assert.Equal(_expected.Quantities, result.Quantities));
    }

    [Fact]
    public void Any_samples_give_values_or_reasons_and_never_throw()
    {
        Gen<double> sample = Gen.OneOf(
            Gen.Double,
            Gen.Double[-1000, 1000],
            Gen.OneOf<double>(
                0, 1, 10, 400, double.NaN, double.PositiveInfinity, double.NegativeInfinity, double.MaxValue));
        Gen<double[]> garbage = sample.Array[0, 400];
        Gen<double[]> blocks = Gen.Select(sample, Gen.Int[1, 300]).Array[1, 12]
            .Select(b => b.SelectMany(x => Enumerable.Repeat(x.Item1, x.Item2)).ToArray());
        Gen<double> intervals = Gen.OneOf<double>(1e-9, 1e-12, 1e-3, 1);
        Gen.Select(Gen.OneOf(garbage, blocks).Array[8], Gen.Int[1, 255], Gen.Bool, intervals)
            .Sample(NeverThrows, iter: 1500);
    }

    [Fact]
    public void A_sound_gate_beside_any_samples_gives_values_or_reasons()
    {
        Gen<double> sample = Gen.OneOf(Gen.Double[-1000, 1000], Gen.Double[-1, 1], Gen.Double);
        Gen<double[]> blocks = Gen.Select(sample, Gen.Int[1, 3000], Gen.Double[0, 500]).Array[1, 30].Select(parts =>
        {
            List<double> samples = [];
            foreach ((double level, int length, double noise) in parts)
            {
                for (int i = 0; i < length; i++)
                {
                    samples.Add(level + (noise * Math.Sin(i * i)));
                }
            }

            return samples.ToArray();
        });
        blocks.Array[7].Sample(
            others =>
            {
                Dictionary<Channel, double[]> channels = new() { [Channel.VgsLow] = _clean[Channel.VgsLow].ToArray() };
                for (int i = 0; i < others.Length; i++)
                {
                    double[] other = others[i];
                    channels[(Channel)(i + 1)] =
                        [.. Enumerable.Range(0, _clean.Count).Select(k => other[k % other.Length])];
                }

                Check(WaveformAnalysis.Analyse(new Waveform(0, 1e-9, channels), _settings));
            },
            iter: 100);
    }

    [Fact]
    public void A_noisy_train_with_samples_missing_anywhere_gives_values_or_reasons()
    {
        Gen.Select(Gen.Int[0, 7], Gen.Int[0, 10_000], Gen.Int[1, 4000], Gen.Int[0, 9000], Gen.Int[100, 10_800]).Sample(
            (channel, at, length, from, count) =>
            {
                Dictionary<Channel, double[]> cut = [];
                count = Math.Min(count, _clean.Count - from);
                foreach ((Channel name, double[] samples) in Channels(_clean, 1, 1))
                {
                    cut[name] = samples.AsSpan(from, count).ToArray();
                    if ((int)name == channel && at < count)
                    {
                        cut[name].AsSpan(at, Math.Min(length, count - at)).Fill(double.PositiveInfinity);
                    }
                }

                Check(WaveformAnalysis.Analyse(new Waveform(0, 1e-9, cut), _settings));
            },
            iter: 100);
    }

    [Fact]
    public void A_quantity_whose_interval_holds_a_clipped_sample_has_no_value_and_the_others_keep_theirs()
    {
        Dictionary<Channel, double[]> channels = Channels(_clean, 1, 1);
        double peak = RawPeak(_expected).To!.Value;
        channels[Channel.IdLow][(int)Math.Round(peak / _clean.SampleInterval) - 1] = double.PositiveInfinity;
        AnalysisResult clipped = WaveformAnalysis.Analyse(new Waveform(0, _clean.SampleInterval, channels), _settings);

        QuantityValue current = RawPeak(clipped);
        Assert.Null(current.Value);
        Assert.Equal("id_low is clipped", current.Reason);
        Assert.Equal(Value(_expected, "eoff"), Value(clipped, "eoff"));
        Assert.NotNull(Value(clipped, "eoff"));
    }

    [Fact]
    public void A_voltage_that_is_used_where_it_is_measured_counts_when_it_is_clipped()
    {
        QuantityValue sound = _expected.Quantities.Single(q => q.Quantity == "loop_inductance");
        Dictionary<Channel, double[]> channels = Channels(_clean, 1, 1);
        channels[Channel.VdsHigh][(int)Math.Round(sound.To!.Value / _clean.SampleInterval) - 2] = double.NaN;
        AnalysisResult clipped = WaveformAnalysis.Analyse(new Waveform(0, _clean.SampleInterval, channels), _settings);
        Assert.Equal(
            "vds_high is clipped", clipped.Quantities.Single(q => q.Quantity == "loop_inductance").Reason);
    }

    private static QuantityValue RawPeak(AnalysisResult result) =>
        result.Quantities.Single(q => q.Quantity == "id_peak_on" && q.Definition == "peak/raw");

    private static double? Value(AnalysisResult result, string quantity) =>
        result.Quantities.First(q => q.Quantity == quantity).Value;

    private static void NeverThrows(double[][] channels, int present, bool every, double interval)
    {
        int count = channels.Where((_, i) => (present >> i & 1) == 1).Min(c => c.Length);
        Dictionary<Channel, double[]> waveform = [];
        for (int i = 0; i < channels.Length; i++)
        {
            if ((present >> i & 1) == 1)
            {
                waveform[(Channel)i] = channels[i][..count];
            }
        }

        AnalysisSettings settings = new() { EveryDefinition = every, IntegrationTime = 50e-9, ForwardVoltage = 1 };
        Check(WaveformAnalysis.Analyse(new Waveform(0, interval, waveform), settings));
        Check(WaveformAnalysis.Analyse(
            new Waveform(0, interval, waveform),
            settings with { Position = DevicePosition.High, Kind = DeviceKind.Igbt }));
    }

    private static void Check(AnalysisResult result) => Assert.All(result.Quantities, q =>
    {
        Assert.True(q.Value is null != q.Reason is null, $"{q}");
        Assert.True(q.Value is null || (double.IsFinite(q.Value.Value) && q.From <= q.To), $"{q}");
    });

    private static void Each(AnalysisResult result, Action<QuantityValue, QuantityValue> same)
    {
        Assert.Equal(_expected.Quantities.Count, result.Quantities.Count);
        foreach ((QuantityValue was, QuantityValue now) in _expected.Quantities.Zip(result.Quantities))
        {
            Assert.Equal((was.Quantity, was.Definition, was.Reason), (now.Quantity, now.Definition, now.Reason));
            if (was.Value is not null)
            {
                same(was, now);
            }
        }
    }

    private static void Near(double? expected, double? actual, double relative) => Assert.True(
        Math.Abs(expected!.Value - actual!.Value) <= relative * Math.Max(Math.Abs(expected.Value), 1e-300),
        $"{expected} {actual}");

    private static Dictionary<Channel, double[]> Channels(Waveform waveform, double volts, double amperes)
    {
        Dictionary<Channel, double[]> channels = [];
        foreach (Channel channel in waveform.Channels)
        {
            double factor = channel.Unit() == "A" ? amperes : volts;
            double[] samples = waveform[channel].ToArray();
            for (int i = 0; i < samples.Length; i++)
            {
                samples[i] *= factor;
            }

            channels[channel] = samples;
        }

        return channels;
    }
}
