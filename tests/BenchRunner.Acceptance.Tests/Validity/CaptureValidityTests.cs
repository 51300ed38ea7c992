using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Validity;

/// <summary>Each criterion fires on a capture whose only flaw it is; none fires on a healthy one.</summary>
public sealed class CaptureValidityTests
{
    private static Finding Only(Verdict verdict, string criterion, FindingClass does)
    {
        Finding finding = Assert.Single(verdict.Findings);
        Assert.Equal(criterion, finding.Criterion);
        Assert.Equal(does, finding.Class);
        Assert.False(verdict.IsValid);
        return finding;
    }

    [Fact]
    public void A_healthy_capture_is_valid_and_only_an_unheated_plate_is_not_evaluated()
    {
        Verdict verdict = CaptureValidity.Judge(Judged.Context());
        Assert.Empty(verdict.Findings.Select(finding => finding.Message));
        Assert.True(verdict.IsValid);
        Assert.Null(verdict.CorrectedFirstPulse);
        Assert.Empty(verdict.NextRange);
        Assert.Equal([Criteria.TemperatureWithin], verdict.NotEvaluated);
    }

    [Fact]
    public void A_missing_channel_is_not_complete()
    {
        CaptureContext healthy = Judged.Context();
        Verdict verdict = CaptureValidity.Judge(
            healthy with { Traces = [.. healthy.Traces.Where(trace => trace.Channel != Channel.Vbus)] });
        Assert.Equal(Channel.Vbus, Only(verdict, Criteria.Complete, FindingClass.Retry).Channel);
    }

    [Fact]
    public void A_short_record_and_another_time_base_are_not_complete()
    {
        CaptureContext healthy = Judged.Context();
        PlannedPoint longer = healthy.Planned with { Samples = healthy.Planned.Samples + 1 };
        Assert.All(
            CaptureValidity.Judge(healthy with { Planned = longer }).Findings,
            finding => Assert.Equal(Criteria.Complete, finding.Criterion));
        PlannedPoint faster = healthy.Planned with { SampleInterval = 0.5e-9 };
        Finding first = CaptureValidity.Judge(healthy with { Planned = faster }).Findings[0];
        Assert.Equal(Criteria.Complete, first.Criterion);
        Assert.Contains("1 ns where 500 ps was set", first.Message, StringComparison.Ordinal);
    }

    [Fact]
    public void A_trace_cut_short_among_whole_ones_is_not_complete_and_breaks_nothing()
    {
        CaptureContext healthy = Judged.Context();
        RawTrace[] cut = [.. healthy.Traces.Select(trace =>
            trace.Channel == Channel.VdsHigh ? trace with { Codes = trace.Codes[..5000] } : trace)];
        Verdict verdict = CaptureValidity.Judge(healthy with
        {
            Traces = cut,
            Analysis = CaptureAnalysis.Of(cut, Planner.AnalysisSettingsOf(healthy.Bench, healthy.Sequence)),
        });
        Assert.Contains(verdict.Findings, finding => finding is
        { Criterion: Criteria.Complete, Channel: Channel.VdsHigh, Seen: 5000 });
        Assert.False(verdict.IsValid);
        Assert.Null(verdict.Stop);
        Assert.Contains(Criteria.CurrentWithin, verdict.NotEvaluated);
    }

    [Theory]
    [InlineData(0, FindingClass.Retry)]
    [InlineData(1, FindingClass.Retry)]
    [InlineData(2, FindingClass.Stop)]
    public void A_count_that_stands_still_is_stale_and_the_third_in_a_row_stops(int before, FindingClass does) =>
        Only(
            CaptureValidity.Judge(Judged.Context() with { CountAfter = 7, StaleBefore = before }), Criteria.Fresh,
                does);

    [Fact]
    public void The_codes_of_the_last_capture_are_stale_and_another_noise_is_not()
    {
        CaptureContext healthy = Judged.Context();
        IReadOnlyList<RawTrace> same = [.. healthy.Traces.Select(trace => trace with { Codes = [.. trace.Codes] })];
        Only(CaptureValidity.Judge(healthy with { Previous = same }), Criteria.Fresh, FindingClass.Retry);
        IReadOnlyList<RawTrace> other = new SyntheticTrain { Seed = 2 }.Record(healthy.Planned);
        Assert.True(CaptureValidity.Judge(healthy with { Previous = other }).IsValid);
    }

    [Fact]
    public void Without_counts_and_without_a_capture_before_freshness_is_not_evaluated() =>
        Assert.Contains(
            Criteria.Fresh, CaptureValidity.Judge(Judged.Context() with { CountBefore = null }).NotEvaluated);

    [Fact]
    public void A_trace_at_the_rail_asks_for_a_wider_range()
    {
        PlannedPoint planned = Judged.Planned;
        PlannedPoint narrow = planned with
        {
            Ranges = [.. planned.Ranges.Select(range =>
                range.Channel == Channel.VdsHigh ? range with { Span = 700, Offset = 300 } : range)],
        };
        Verdict verdict = CaptureValidity.Judge(Judged.Context(planned: narrow));
        Assert.Equal(Channel.VdsHigh, Only(verdict, Criteria.NotClipped, FindingClass.Retry).Channel);
        Assert.True(verdict.NextRange[Channel.VdsHigh]);
    }

    [Fact]
    public void A_trace_that_is_small_in_its_range_asks_for_a_narrower_one()
    {
        CaptureContext healthy = Judged.Context();
        RawTrace[] traces = [.. new SyntheticTrain().Record(healthy.Planned, [.. healthy.Planned.Ranges.Select(range =>
            range.Channel == Channel.VdsHigh ? range with { Span = 6000, Offset = 300 } : range)])];
        Verdict verdict = CaptureValidity.Judge(healthy with { Traces = traces });
        Only(verdict, Criteria.RangeUsed, FindingClass.Retry);
        Assert.False(verdict.NextRange[Channel.VdsHigh]);
    }

    [Fact]
    public void A_third_pulse_is_not_two_pulses() =>
        Assert.Contains(
            Judged.Of(new SyntheticTrain { ExtraPulse = true }).Findings,
            finding => finding is { Criterion: Criteria.TwoPulses, Class: FindingClass.Retry, Seen: 6 });

    [Theory]
    [InlineData(2.85e-6, FindingClass.Retry)]
    [InlineData(3.15e-6, FindingClass.Stop)]
    public void A_pulse_off_its_width_is_taken_again_and_a_longer_one_stops(double second, FindingClass does) =>
        Only(Judged.Of(new SyntheticTrain { Second = second }), Criteria.TwoPulses, does);

    [Fact]
    public void A_width_that_the_proving_train_showed_is_no_flaw() =>
        Assert.True(CaptureValidity.Judge(
            Judged.Context(new SyntheticTrain { Second = 3.15e-6 }) with { ShownLonger = 0.1e-6 }).IsValid);

    [Fact]
    public void A_current_before_the_train_is_off_the_baseline()
    {
        CaptureContext context = Judged.Context();
        Only(
            CaptureValidity.Judge(context with { Zero = Judged.Zero(context.Traces, -0.6) }), Criteria.Baseline,
            FindingClass.Retry);
    }

    [Theory]
    [InlineData(1.05)]
    [InlineData(0.95)]
    public void A_current_off_its_target_corrects_the_first_pulse(double factor)
    {
        double width = new SyntheticTrain().First;
        Verdict verdict = CaptureValidity.Judge(Judged.Context(new SyntheticTrain { First = width * factor })
            with
        { Set = new TrainSet(width * factor, 6e-6, 3e-6, 18, -4) });
        Only(verdict, Criteria.CurrentWithin, FindingClass.Retry);

        // In proportion to the width set, of which some ten ns pass before the current rises.
        Assert.Equal(width, verdict.CorrectedFirstPulse!.Value, 0.01 * width);
    }

    [Fact]
    public void A_current_probe_at_a_tenth_stops_the_run()
    {
        Verdict verdict = Judged.Of(new SyntheticTrain { CurrentGain = 0.5 });
        Assert.Equal(
            [Criteria.BusAgrees, Criteria.CurrentWithin],
            verdict.Findings.Where(finding => finding.Class == FindingClass.Stop).Select(finding => finding.Criterion)
                .Order());
        Assert.Null(verdict.CorrectedFirstPulse);
    }

    [Fact]
    public void A_current_above_the_envelope_stops_the_run()
    {
        CaptureContext context = Judged.Context();
        Verdict verdict = CaptureValidity.Judge(context with
        {
            Bench = context.Bench with { Envelope = context.Bench.Envelope with { Current = 39 } },
        });
        Only(verdict, Criteria.CurrentWithin, FindingClass.Stop);
    }

    [Fact]
    public void A_bus_off_its_target_waits_and_corrects_no_width()
    {
        // 585 V is 2.5 % low, and the current with it; the voltmeter sees the same bus.
        Verdict verdict = CaptureValidity.Judge(
            Judged.Context(new SyntheticTrain { Bus = 585 }) with { Voltmeter = 585 });
        Assert.Equal(
            [Criteria.BusWithin, Criteria.CurrentWithin],
                verdict.Findings.Select(finding => finding.Criterion).Order());
        Assert.All(verdict.Findings, finding => Assert.Equal(FindingClass.Retry, finding.Class));
        Assert.Null(verdict.CorrectedFirstPulse);
    }

    [Fact]
    public void A_bus_above_the_envelope_stops_the_run()
    {
        CaptureContext context = Judged.Context();
        Only(
            CaptureValidity.Judge(context with
            {
                Bench = context.Bench with { Envelope = context.Bench.Envelope with { Voltage = 590 } },
            }),
            Criteria.BusWithin, FindingClass.Stop);
    }

    [Fact]
    public void A_bank_that_droops_is_found() =>
        Only(Judged.Of(new SyntheticTrain { DroopVolts = 21 }), Criteria.BusDroop, FindingClass.Retry);

    [Fact]
    public void A_ramp_with_a_bulge_is_taken_again() =>
        Only(Judged.Of(new SyntheticTrain { Bulge = 1.3 }), Criteria.RampStraightness, FindingClass.Retry);

    [Fact]
    public void A_ramp_that_grows_by_a_fifth_stops_the_run()
    {
        Verdict verdict = Judged.Of(new SyntheticTrain { Bend = 0.1 });
        Assert.Equal(Criteria.RampStraightness, verdict.Stop!.Criterion);
        Assert.True(verdict.Stop.Seen > 0.2);
    }

    [Theory]
    [InlineData(0.4, true)]
    [InlineData(0.7, false)]
    public void A_gate_held_off_that_rises_above_its_threshold_stops_the_run(double peak, bool valid)
    {
        Verdict verdict = Judged.Of(new SyntheticTrain { HighGatePeak = peak });
        Assert.Equal(valid, verdict.IsValid);
        Assert.Equal(valid ? null : Criteria.HighSideOff, verdict.Stop?.Criterion);
    }

    [Theory]
    [InlineData(25, true)]
    [InlineData(45, false)]
    public void A_switch_that_is_not_fully_on_stops_the_run(double volts, bool valid)
    {
        // 5 % of 600 V, plus a hysteresis of 1 % of the step.
        Verdict verdict = Judged.Of(new SyntheticTrain { OnVoltage = volts });
        Assert.Equal(valid, verdict.IsValid);
        Assert.Equal(valid ? null : Criteria.Desaturated, verdict.Stop?.Criterion);
    }

    [Fact]
    public void An_edge_before_the_ringing_has_decayed_is_found() =>
        Only(
            CaptureValidity.Judge(Judged.Context(planned: Judged.Planned with { RingDecay = 4e-6 })),
            Criteria.Settled, FindingClass.Retry);

    [Fact]
    public void A_noisy_record_is_taken_again()
    {
        Verdict verdict = CaptureValidity.Judge(Judged.Context() with
        {
            Sequence = Shipped.Rated with { Validity = new ValidityBounds { NoiseBelow = 0.0004 } },
        });
        Assert.NotEmpty(verdict.Findings);
        Assert.All(verdict.Findings, finding => Assert.Equal(Criteria.NoiseBelow, finding.Criterion));
        Assert.Contains(
            Judged.Of(new SyntheticTrain { Noise = 0.013 }).Findings, finding =>
                finding.Criterion == Criteria.NoiseBelow);
    }

    [Fact]
    public void A_voltmeter_that_disagrees_stops_the_run() =>
        Only(CaptureValidity.Judge(Judged.Context() with { Voltmeter = 620 }), Criteria.BusAgrees, FindingClass.Stop);

    [Fact]
    public void Another_inductor_stops_the_run()
    {
        CaptureContext context = Judged.Context();
        Only(
            CaptureValidity.Judge(context with { Bench = context.Bench with { LoadInductance = 150e-6 } }),
            Criteria.BusAgrees, FindingClass.Stop);
    }

    [Fact]
    public void Without_a_voltmeter_agreement_is_not_evaluated() =>
        Assert.Contains(
            Criteria.BusAgrees, CaptureValidity.Judge(Judged.Context() with { Voltmeter = null }).NotEvaluated);

    [Theory]
    [InlineData(17.2, -4.0, FindingClass.Retry)]
    [InlineData(18.0, -3.3, FindingClass.Stop)]
    [InlineData(18.0, -4.7, FindingClass.Retry)]
    public void A_gate_level_off_what_was_set_is_found_and_a_high_off_level_stops(
        double on, double off, FindingClass does) =>
        Only(Judged.Of(new SyntheticTrain { GateOn = on, GateOff = off }), Criteria.GateLevels, does);

    [Fact]
    public void A_plate_off_its_temperature_is_found()
    {
        PlannedPoint hot = Judged.Planned with { Point = Judged.Planned.Point with { Temperature = 125 } };
        CaptureContext context = Judged.Context() with { Planned = hot, Plate = 121 };
        Only(CaptureValidity.Judge(context), Criteria.TemperatureWithin, FindingClass.Retry);
        Assert.True(CaptureValidity.Judge(context with { Plate = 126 }).IsValid);
    }
}
