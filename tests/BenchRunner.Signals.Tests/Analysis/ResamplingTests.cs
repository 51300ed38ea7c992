using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Tests.Support;
using BenchRunner.Signals.Traces;
using CsCheck;

namespace BenchRunner.Signals.Tests.Analysis;

/// <summary>Energies do not hang on the sample rate where an edge has at least ten samples.</summary>
public sealed class ResamplingTests
{
    private const double Bound = 0.003;
    private const double Slow = 1e-9;
    private const int Times = 5;

    [Fact]
    public void Energies_of_smooth_edges_are_the_same_at_1_and_at_5_samples_a_nanosecond()
    {
        // 10 to 60 samples between 10 % and 90 %, the sampling grid anywhere.
        Gen<double> duration = Gen.Double[10 * Slow, 60 * Slow];
        Gen.Select(duration.Array[4], Gen.Double[0, 1], Gen.Double[0, Slow]).Sample(
            (durations, recovery, origin) =>
            {
                SmoothTrain train = new(durations[0], durations[1], durations[2], durations[3], recovery);
                AnalysisSettings settings = new() { EveryDefinition = true };
                AnalysisResult coarse = WaveformAnalysis.Analyse(train.Sample(Slow, origin), settings);
                AnalysisResult fine = WaveformAnalysis.Analyse(train.Sample(Slow / Times, origin), settings);
                Near(fine, coarse, "eon", "e/10-10");
                Near(fine, coarse, "eon", "e/10-2");
                Near(fine, coarse, "eoff", "e/10-10");
                Near(fine, coarse, "eoff", "e/10-2");
            },
            iter: 40);
    }

    [Fact]
    public void The_turn_off_energy_of_a_simulated_record_is_the_same_at_five_times_the_rate()
    {
        // Simulated turn-off: 16 samples of voltage, 20 of current. Its turn-on rises within 6 samples: not tried here.
        Waveform record = Reference.Waveform("hv650soft-clean.csv.gz");
        AnalysisSettings settings = Reference.Settings("hv650soft", measured: false);
        Dictionary<Channel, double[]> finer = record.Channels.ToDictionary(c => c, c => BandLimited(record[c]));
        AnalysisResult coarse = WaveformAnalysis.Analyse(record, settings);
        AnalysisResult fine = WaveformAnalysis.Analyse(
            new Waveform(record.TimeOrigin, record.SampleInterval / Times, finer), settings);
        Near(fine, coarse, "eoff", "e/10-10");
        Near(fine, coarse, "eoff", "e/10-2");
    }

    private static void Near(AnalysisResult fine, AnalysisResult coarse, string quantity, string definition)
    {
        QuantityValue wanted = Find(fine, quantity, definition);
        QuantityValue got = Find(coarse, quantity, definition);
        Assert.True(wanted.Value is not null && got.Value is not null, $"{quantity}: {wanted.Reason ?? got.Reason}");
        Assert.InRange(got.Value.Value / wanted.Value.Value, 1 - Bound, 1 + Bound);
    }

    private static QuantityValue Find(AnalysisResult result, string quantity, string definition) =>
        result.Quantities.Single(q => q.Quantity == quantity && q.Definition == definition);

    /// <summary>Between samples by a sinc under a Hann window, 16 samples to each side; beyond the ends the end
    /// values.</summary>
    private static double[] BandLimited(ReadOnlySpan<double> samples)
    {
        const int reach = 16;
        double[] finer = new double[((samples.Length - 1) * Times) + 1];
        for (int i = 0; i < finer.Length; i++)
        {
            int before = i / Times;
            double part = i % Times / (double)Times;
            if (part == 0)
            {
                finer[i] = samples[before];
                continue;
            }

            double sum = 0;
            double weights = 0;
            for (int k = -reach + 1; k <= reach; k++)
            {
                double x = Math.PI * (part - k);
                double weight = Math.Sin(x) / x * (1 + Math.Cos(x / reach)) / 2;
                sum += weight * samples[Math.Clamp(before + k, 0, samples.Length - 1)];
                weights += weight;
            }

            finer[i] = sum / weights;
        }

        return finer;
    }
}
