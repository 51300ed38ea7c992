using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Validity;

/// <summary>A train of the high switch is judged as the low one's, with the places swapped.</summary>
public sealed class MirroredPlacesTests
{
    private static readonly Bench _bench = Shipped.Bench with
    {
        LoadToPositive = false,
        Channels =
        [
            .. Shipped.Bench.Channels.Select(setup => setup with
            {
                Channel = HalfBridge.Playing(setup.Channel, firesHigh: true),
                Probe = setup.Probe == "shunt" ? "coil" : setup.Probe,
            }),
        ],
    };

    private static readonly Sequence _sequence = Shipped.Rated with { Position = DevicePosition.High, Limits = [] };

    private static Verdict Judge(SyntheticTrain train)
    {
        PlannedPoint planned = Shipped.Point(_sequence, _bench);
        RawTrace[] swapped =
        [
            .. train.Record(Judged.Planned).Select(trace => trace with
            {
                Channel = HalfBridge.Playing(trace.Channel, firesHigh: true),
            }),
        ];
        return CaptureValidity.Judge(Judged.Context() with
        {
            Planned = planned,
            Sequence = _sequence,
            Bench = _bench,
            Traces = swapped,
            Zero = Judged.Zero(swapped, 0),
            Analysis = CaptureAnalysis.Of(swapped, Planner.AnalysisSettingsOf(_bench, _sequence)),
        });
    }

    [Fact]
    public void A_high_switch_on_a_load_to_the_negative_rail_is_not_refused() =>
        Assert.Empty(Planner.Plan(_sequence, _bench).Refusals.Select(problem => problem.ToString()));

    [Fact]
    public void A_sound_train_of_the_high_switch_is_valid()
    {
        Verdict verdict = Judge(new SyntheticTrain());
        Assert.Empty(verdict.Findings.Select(finding => finding.Message));
        Assert.Equal([Criteria.TemperatureWithin], verdict.NotEvaluated);
    }

    [Fact]
    public void Findings_name_the_channel_of_the_place_that_has_the_flaw()
    {
        Assert.Equal(Channel.VgsLow, Judge(new SyntheticTrain { HighGatePeak = 0.7 }).Stop!.Channel);
        Assert.Equal(Channel.VdsHigh, Judge(new SyntheticTrain { OnVoltage = 45 }).Stop!.Channel);
        Assert.Equal(Channel.VgsHigh, Judge(new SyntheticTrain { Second = 3.15e-6 }).Stop!.Channel);
    }
}
