using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Corrections;
using BenchRunner.Signals.Traces;
using CsCheck;

namespace BenchRunner.Signals.Tests.Corrections;

public sealed class CorrectionTests
{
    private const double Dt = 1e-9;

    [Fact]
    public void With_nothing_stated_the_waveform_is_the_very_same()
    {
        Waveform record = Record([1, 2, 3]);

        Assert.Same(record, Correction.Correct(record, new AnalysisSettings()));
        Assert.Same(record, Correction.Correct(record, Stating(new ChannelCorrection(1, 0, 0))));
    }

    [Fact]
    public void A_channel_without_errors_shares_its_samples()
    {
        double[] vds = [4, 5, 6];
        Waveform record = new(0, Dt, new Dictionary<Channel, double[]>
        {
            [Channel.IdLow] = [1, 2, 3],
            [Channel.VdsLow] = vds,
        });

        Waveform corrected = Correction.Correct(record, Stating(new ChannelCorrection(2, 0, 0)));

        Assert.True(corrected[Channel.VdsLow] == vds.AsSpan());
        Assert.Equal([0.5, 1, 1.5], corrected[Channel.IdLow].ToArray());
        Assert.Equal([1.0, 2, 3], record[Channel.IdLow].ToArray());
    }

    [Fact]
    public void Offset_comes_off_before_the_gain()
    {
        // Recorded = gain · true + offset, with the figures that the waveform format gives as its example.
        Waveform corrected = Correction.Correct(
            Record([0.96, (1.013 * 20) + 0.96]), Stating(new ChannelCorrection(1.013, 0.96)));

        Assert.Equal(0, corrected[Channel.IdLow][0]);
        Assert.Equal(20, corrected[Channel.IdLow][1], 1e-13);
    }

    [Fact]
    public void The_smallest_step_is_scaled_with_the_samples()
    {
        Waveform record = new(
            0,
            Dt,
            new Dictionary<Channel, double[]> { [Channel.IdLow] = [1, 2] },
            new Dictionary<Channel, double> { [Channel.IdLow] = 0.5 });

        Assert.Equal(0.25, Correction.Correct(record, Stating(new ChannelCorrection(-2))).Step(Channel.IdLow));
    }

    [Fact]
    public void An_unstated_offset_of_a_current_stays_for_the_analysis_to_find()
    {
        Waveform record = Record([5, 5, 5]);

        Assert.Equal([5.0, 5, 5], Correction.Correct(record, new AnalysisSettings())[Channel.IdLow].ToArray());
    }

    [Fact]
    public void A_parabola_is_moved_exactly_up_to_the_ends_of_the_record() =>
        Gen.Select(Gen.Double[-20, 20], Gen.Int[7, 40]).Sample((skew, count) =>
        {
            static double Parabola(double n) => 3 - (0.7 * n) + (0.05 * n * n);
            double[] moved = Moved(Make(count, n => Parabola(n)), skew);
            for (int n = 0; n < count; n++)
            {
                double at = Math.Clamp(n + skew, 0, count - 1);
                Assert.Equal(Parabola(at), moved[n], 1e-9);
            }
        });

    [Fact]
    public void A_band_limited_signal_comes_back_after_being_moved_to_and_fro() =>
        Gen.Select(Gen.Double[-5, 5], Gen.Double[0.01, 0.07], Gen.Double[0, 6]).Sample((skew, f, phase) =>
        {
            double[] signal = Make(200, n => Math.Sin((2 * Math.PI * f * n) + phase));
            double[] back = Moved(Moved(signal, skew), -skew);
            for (int n = 15; n < 185; n++)
            {
                // Each move errs by less than 1e-4 of the amplitude: 5/16 sin^6(pi f) at half a sample.
                Assert.Equal(signal[n], back[n], 2e-4);
            }
        });

    [Fact]
    public void A_skew_of_whole_samples_moves_the_very_samples() =>
        Assert.Equal([3.5, 4.5, 9, 9, 9], Moved([1, 2, 3.5, 4.5, 9], 2));

    [Fact]
    public void A_sine_recorded_late_is_brought_back_to_its_time()
    {
        // 70 MHz at 1 GS/s, 4.6 ns late: the error stated in the documentation is 4e-5 of the amplitude.
        double[] recorded = Make(300, n => Math.Sin(2 * Math.PI * 0.07 * (n - 4.6)));

        double[] moved = Moved(recorded, 4.6);

        for (int n = 10; n < 290; n++)
        {
            Assert.Equal(Math.Sin(2 * Math.PI * 0.07 * n), moved[n], 4e-5);
        }
    }

    [Fact]
    public void A_skew_beyond_the_record_holds_its_end() =>
        Assert.All(Moved(Make(20, n => n), 1e9), value => Assert.Equal(19, value));

    [Fact]
    public void A_clipped_sample_stays_local_whatever_is_corrected() =>
        Gen.Select(
            Gen.Double[-3, 3],
            Gen.Int[50, 149],
            Gen.OneOf(Gen.Const(double.NaN), Gen.Const(double.PositiveInfinity)))
            .Sample((skew, at, bad) =>
            {
                double[] samples = Make(200, n => Math.Sin(0.05 * n));
                AnalysisSettings settings = Stating(new ChannelCorrection(1.1, 0.2, skew * Dt)) with
                {
                    Shunt = new Shunt(0.02, 1e-10),
                };
                double[] clean = Correction.Correct(Record(samples), settings)[Channel.IdLow].ToArray();
                samples[at] = bad;
                double[] hurt = Correction.Correct(Record(samples), settings)[Channel.IdLow].ToArray();
                for (int n = 0; n < 200; n++)
                {
                    double source = n + skew;
                    if (source < at - 4)
                    {
                        Assert.Equal(clean[n], hurt[n]);
                    }
                    else if (source > at + 4)
                    {
                        Assert.True(double.IsFinite(hurt[n]));
                    }
                }

                // The shunt's memory (5 ns) is over 12 time constants later.
                Assert.Equal(clean[195], hurt[195], 1e-2);
            });

    [Fact]
    public void On_a_ramp_the_shunt_is_early_by_tau_and_that_is_undone()
    {
        // closed-form.json, shunt-ramp: 10 mohm, 20 pH, 5 A/ns: 10 A too much at any time; none once settled.
        double[] recorded = Make(200, n => 5.0 * n + 10);
        AnalysisSettings settings = new() { Shunt = new Shunt(0.01, 2e-11) };

        ReadOnlySpan<double> current = Correction.Correct(Record(recorded), settings)[Channel.IdLow];

        for (int n = 0; n < 200; n++)
        {
            Assert.Equal((5.0 * n) + (10 * Math.Exp(-n / 2.0)), current[n], 1e-9);
        }
    }

    [Fact]
    public void The_shunt_is_undone_on_what_it_does_to_any_smooth_current() =>
        Gen.Select(Gen.Double[0.1, 20], Gen.Double[0.002, 0.02], Gen.Double[0, 6]).Sample((tau, f, phase) =>
        {
            double w = 2 * Math.PI * f;
            double[] recorded = Make(600, n =>
                Math.Sin((w * n) + phase) + (tau * w * Math.Cos((w * n) + phase)));
            AnalysisSettings settings = new() { Shunt = new Shunt(0.02, 0.02 * tau * Dt) };
            ReadOnlySpan<double> current = Correction.Correct(Record(recorded), settings)[Channel.IdLow];
            for (int n = 500; n < 600; n++)
            {
                // Straight lines between the samples miss at most (w dt)^2/8 of what was recorded.
                Assert.Equal(Math.Sin((w * n) + phase), current[n], w * w / 8 * (1 + (tau * w)));
            }
        });

    [Fact]
    public void The_shunt_concerns_the_low_current_alone()
    {
        Waveform record = new(0, Dt, new Dictionary<Channel, double[]> { [Channel.IdHigh] = [0, 1, 2] });

        Assert.Same(record, Correction.Correct(record, new AnalysisSettings { Shunt = new Shunt(0.01, 1e-10) }));
    }

    [Theory]
    [InlineData(0, 0, 0)]
    [InlineData(double.NaN, 0, 0)]
    [InlineData(1, double.PositiveInfinity, 0)]
    [InlineData(1, 0, double.NaN)]
    public void Stated_errors_that_cannot_be_undone_are_refused(double gain, double offset, double skew) =>
        Assert.Throws<ArgumentException>(
            () => Correction.Correct(Record([1]), Stating(new ChannelCorrection(gain, offset, skew))));

    [Theory]
    [InlineData(0, 1e-10)]
    [InlineData(0.01, -1e-10)]
    [InlineData(double.NaN, 0)]
    public void A_shunt_that_cannot_be_is_refused(double resistance, double inductance) =>
        Assert.Throws<ArgumentException>(() => Correction.Correct(
            Record([1]), new AnalysisSettings { Shunt = new Shunt(resistance, inductance) }));

    [Theory]
    [InlineData(0)]
    [InlineData(1)]
    [InlineData(5)]
    public void Records_of_few_samples_are_corrected_too(int count)
    {
        AnalysisSettings settings = Stating(new ChannelCorrection(2, 1, 0.3 * Dt)) with { Shunt = new Shunt(1, 1e-9) };

        Assert.Equal(count, Correction.Correct(Record(new double[count]), settings)[Channel.IdLow].Length);
    }

    private static double[] Moved(double[] samples, double skewSamples)
    {
        // In units of whole samples the division by dt in the program is exact.
        Waveform record = new(0, 1, new Dictionary<Channel, double[]> { [Channel.IdLow] = samples });
        return Correction.Correct(record, Stating(new ChannelCorrection(1, 0, skewSamples)))[Channel.IdLow].ToArray();
    }

    private static Waveform Record(double[] current) =>
        new(0, Dt, new Dictionary<Channel, double[]> { [Channel.IdLow] = current });

    private static AnalysisSettings Stating(ChannelCorrection correction) => new()
    {
        Corrections = new Dictionary<Channel, ChannelCorrection> { [Channel.IdLow] = correction },
    };

    private static double[] Make(int count, Func<int, double> value) => [.. Enumerable.Range(0, count).Select(value)];
}
