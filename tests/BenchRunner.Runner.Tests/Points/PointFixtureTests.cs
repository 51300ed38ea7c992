using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Runner.Cases;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Tests.Workplaces;

namespace BenchRunner.Runner.Tests.Points;

/// <summary>How many trains a point fires, with which width, and when it is left.</summary>
public sealed class PointFixtureTests : IDisposable
{
    private readonly Workplace _place = new();
    private readonly RecordingSink _heard = new();

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task Until_decided_goes_on_while_a_limit_is_open_and_only_then()
    {
        DeviceReport plain = await Run("""
            captures: { valid: 2, at-most: 3 }
            until: decided
            limits:
              - { quantity: eon, at: half, at-most: 1 mJ }
            """);
        MeasuredValue eon = plain.Decision.Values.Single(value => value.Quantity == "eon");
        Assert.Equal((Outcome.Accepted, 2), (plain.Decision.Outcome, plain.CapturesTaken));

        // A limit at the value itself lies within the guard band, however many captures are taken.
        DeviceReport open = await Run(FormattableString.Invariant($$"""
            captures: { valid: 2, at-most: 3 }
            until: decided
            limits:
              - { quantity: eon, at: half, at-most: {{eon.Value * 1e6:0.00}} uJ }
            """));

        Assert.Equal((Outcome.Undecided, 3), (open.Decision.Outcome, open.CapturesTaken));
    }

    [Fact]
    public async Task A_failed_limit_that_says_so_leaves_the_higher_points_out()
    {
        // W1200-9001 is listed by `FakeBench devices` with too much recovered charge.
        DeviceReport report = await Run(
            """
            captures: { valid: 2, at-most: 4 }
            limits:
              - { quantity: qrr, at: half, at-most: 585 nC, else-skip-higher: true }
              - { quantity: eon, at: rated, at-most: 1 mJ }
            """,
            points: 2,
            device: "W1200-9001");

        Assert.Equal(Outcome.Rejected, report.Decision.Outcome);
        Assert.Equal(1, _heard.Count("higher-skipped"));
        Assert.Equal([CaseEnding.Fails, CaseEnding.NotMeasured], _heard.Cases.Select(one => one.Ending));
        Assert.Equal(
            "zero,proving-before,half,proving-after",
            _place.Ask<string>("select group_concat(distinct operating_point) from captures"));
    }

    [Fact]
    public async Task Points_run_as_written_may_fall_the_bleeder_brings_the_bus_down_between_them()
    {
        Sequence sequence = _place.Sequence(
            """
            order: as-written
            captures: { valid: 2, at-most: 4 }
            limits:
              - { quantity: eon, at: half, at-most: 1 mJ }
            """,
            points: 2);
        sequence = sequence with { OperatingPoints = [.. sequence.OperatingPoints.Reverse()] };

        DeviceReport report = Assert.Single((await _place.Run(sequence, _place.Bench(), _heard)).Devices);

        Assert.Equal((Outcome.Accepted, BenchEnding.Proved), (report.Decision.Outcome, report.Ending));
        Assert.Equal(
            "rated rated half half", string.Join(' ', Enumerable.Range(0, 4).Select(i => _place.Ask<string>(
                "select operating_point from captures where operating_point in ('half', 'rated') order by taken_at "
                    + $"limit 1 offset {i}"))));
        Assert.Equal(3, _heard.Count("bus-down"));
    }

    [Fact]
    public async Task Too_few_valid_captures_are_no_measurement()
    {
        // No scope is as quiet as that: every capture is rejected.
        DeviceReport report = await Run("""
            captures: { valid: 2, at-most: 3 }
            validity: { noise-below: 0.0001 % }
            limits:
              - { quantity: eon, at: half, at-most: 1 mJ }
            """);

        Assert.Equal((Outcome.NotMeasured, BenchEnding.Proved), (report.Decision.Outcome, report.Ending));
        Assert.Equal((3, 0), (report.CapturesTaken, report.CapturesValid));
        Assert.Equal(CaseEnding.NotMeasured, Assert.Single(_heard.Cases).Ending);
        Assert.Equal(1, _heard.Count("too-few-valid"));
        Assert.Equal(
            3, _place.Ask<int>("select count(*) from captures where not valid and findings like '%noise-below%'"));
    }

    [Fact]
    public async Task A_load_that_differs_from_its_stated_value_is_met_by_another_pulse_width()
    {
        // 127.2 uH stated, 120 uH fitted: the first train runs 6 % too high.
        DeviceReport report = await Run(
            """
            captures: { valid: 2, at-most: 6 }
            validity: { current-within: 2 % }
            limits:
              - { quantity: eon, at: half, at-most: 1 mJ }
            """,
            edits: ("inductance: 120 uH", "inductance: 127.2 uH"));

        Assert.Equal(Outcome.Accepted, report.Decision.Outcome);
        Assert.InRange(_place.Ask<double>("select load_current from captures where operating_point = 'half' and capture = 1"), 20.8, 21.6);
        Assert.Equal(
            1, _place.Ask<int>("select count(*) from captures where not valid and findings like '%current-within%'"));
        Assert.Equal(0, _place.Ask<int>(
                "select count(*) from captures where operating_point = 'half' and valid and abs(load_current - 20) > 0.4"));
    }

    private async Task<DeviceReport> Run(
        string rest, int points = 1, string device = Workplace.Device, params (string Old, string New)[] edits)
    {
        Sequence sequence = _place.Sequence(rest, points);
        return Assert.Single((await _place.Run(sequence, _place.Bench(edits), _heard, device)).Devices);
    }
}
