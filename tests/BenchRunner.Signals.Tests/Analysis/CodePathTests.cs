using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Tests.Analysis;

/// <summary>A capture as ADC codes and the same capture as values say the same: exact integer sums against ordered sums
/// of doubles.</summary>
public sealed class CodePathTests
{
    private const double Relative = 1e-12;

    [Theory]
    [InlineData("hv650soft", 12, 1.0, false)]
    [InlineData("hv650soft", 12, -1.0, false)]
    [InlineData("hv650snap", 16, 1.0, true)]
    [InlineData("hv650snap", 8, 1.0, false)]
    [InlineData("lv40", 8, 1.0, true)]
    [InlineData("lv40", 12, -1.0, true)]
    [InlineData("saturating", 12, 1.0, true)]
    public void Codes_and_their_values_give_the_same_quantities(string scenario, int bits, double sign, bool corrected)
    {
        RawTrace[] traces = Digitise(Reference.Waveform($"{scenario}-measured.csv.gz"), bits, sign);
        AnalysisSettings settings = Reference.Settings(scenario, measured: corrected) with { EveryDefinition = true };
        AnalysisResult byCodes = WaveformAnalysis.Analyse(traces, settings);
        AnalysisResult byValues = WaveformAnalysis.Analyse(Values(traces), settings);
        Assert.Equal(byValues.Quantities.Count, byCodes.Quantities.Count);
        Assert.All(byValues.Quantities.Zip(byCodes.Quantities), pair =>
        {
            (QuantityValue values, QuantityValue codes) = pair;
            Assert.Equal(values.Reason, codes.Reason);
            if (values.Value is { } expected)
            {
                double allowed = Relative * Math.Max(Math.Abs(expected), Least(values));
                Assert.InRange(codes.Value!.Value, expected - allowed, expected + allowed);
            }
        });
        Assert.Contains(byCodes.Quantities, value => value.Value is not null);
    }

    [Fact]
    public void Traces_and_their_waveform_give_the_same_bits()
    {
        RawTrace[] traces = Digitise(Reference.Waveform("hv650soft-measured.csv.gz"), 12, 1);
        AnalysisSettings settings = Reference.Settings("hv650soft", measured: true);
        AnalysisResult direct = WaveformAnalysis.Analyse(traces, settings);
        AnalysisResult converted = WaveformAnalysis.Analyse(TraceConversion.ToWaveform(traces), settings);
        Assert.Equal(converted.Quantities, direct.Quantities);
    }

    /// <summary>A ratio of small differences is only as good as what it is a difference of.</summary>
    private static double Least(QuantityValue value) => value.Quantity switch
    {
        "ramp_straightness" or "bus_droop" => 1,
        _ => 0,
    };

    private static RawTrace[] Digitise(Waveform waveform, int bits, double sign) =>
    [
        .. waveform.Channels.Select(channel =>
        {
            double[] samples = waveform[channel].ToArray();
            (double low, double high) = (samples.Min(), samples.Max());
            int codes = 1 << bits;
            double increment = sign * (high - low) * 1.1 / codes;
            double origin = (low + high) / 2;
            return new RawTrace(
                channel,
                [.. samples.Select(x => (short)Math.Round((x - origin) / increment))],
                waveform.TimeOrigin,
                waveform.SampleInterval,
                increment,
                origin,
                Reference: 0,
                (short)(-codes / 2),
                (short)((codes / 2) - 1));
        }),
    ];

    /// <summary>The values of the codes alone, as a file would hold them, with the steps of the record.</summary>
    private static Waveform Values(RawTrace[] traces)
    {
        Waveform waveform = TraceConversion.ToWaveform(traces);
        return new Waveform(
            waveform.TimeOrigin,
            waveform.SampleInterval,
            traces.ToDictionary(trace => trace.Channel, trace => waveform[trace.Channel].ToArray()),
            traces.ToDictionary(trace => trace.Channel, trace => waveform.Step(trace.Channel)));
    }
}
