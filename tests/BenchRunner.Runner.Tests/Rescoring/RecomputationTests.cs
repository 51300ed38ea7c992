using System.Globalization;
using System.Text.Encodings.Web;
using System.Text.Json;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Acceptance.Validity;
using BenchRunner.Evidence.Captures;
using BenchRunner.Evidence.Queries;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Sessions;
using BenchRunner.Runner.Tests.Workplaces;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Runner.Tests.Rescoring;

/// <summary>The evidence alone is enough: every verdict, every value and the decision come out of it again, bit for
/// bit.</summary>
public sealed class RecomputationTests : IDisposable
{
    private const string Limits = """
        captures: { valid: 3, at-most: 9 }
        limits:
          - { quantity: eon, at: half, at-most: 1 mJ }
          - { quantity: qrr, at: half, at-most: 5 uC }
          - { quantity: vds_on, at: half, at-most: 4 V }
        """;

    private static readonly JsonSerializerOptions _readable =
        new() { Encoder = JavaScriptEncoder.UnsafeRelaxedJsonEscaping };

    private readonly Workplace _place = new();
    private readonly RecordingSink _heard = new();

    public void Dispose() => _place.Dispose();

    /// <summary>Faults make captures that are rejected for what is read beside the traces: counts, voltmeter, the zero,
    /// the proving train's width.</summary>
    [Theory]
    [Trait("kind", "slow")]
    [InlineData("probe-drift", Criteria.Baseline)]
    [InlineData("stale-record", Criteria.Fresh)]
    [InlineData("clipped-range", Criteria.NotClipped)]
    [InlineData("short-pulse", Criteria.TwoPulses)]
    [InlineData("inductor-off", Criteria.CurrentWithin)]
    public async Task A_run_with_rejected_captures_is_computed_again(string fault, string criterion)
    {
        Recomputed again = await RunAndCompute(fault);

        Assert.Contains(again.Captures, one => one.Verdict.Findings.Any(finding => finding.Criterion == criterion));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_train_that_left_no_record_changes_nothing_of_it()
    {
        Recomputed again = await RunAndCompute("trigger-missed");

        Assert.Equal(1, _heard.Count("trigger-missed"));
        Assert.True(again.Captures.Count >= 5, "two proving trains and three captures at least");
    }

    [Fact]
    public async Task A_run_is_computed_again_from_the_evidence_alone_and_its_zero_capture_matters()
    {
        Recomputed again = await RunAndCompute("");

        foreach (Channel channel in (Channel[])[Channel.VdsLow, Channel.VdsHigh, Channel.Vbus])
        {
            // The offset was found by the zero capture, so that nothing is left of it.
            Assert.Equal(0, again.Zero.Residual(channel));
        }

        using EvidenceReader evidence = EvidenceReader.Open(_place.Evidence);
        Recomputed blind = Recomputed.Of(evidence, Assert.Single(_heard.Devices).Run, withZero: false);
        Assert.NotEqual(
            again.Decision.Values.Select(value => value.Value), blind.Decision.Values.Select(value => value.Value));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_high_device_is_computed_again_and_its_companion_counts_every_capture_of_stopped_runs_too()
    {
        DeviceReport whole = await RunHigh("W1200-0011", "");
        Recomputed again = Compute(whole);
        Assert.Equal(Outcome.Accepted, again.Decision.Outcome);

        DeviceReport stopped = await RunHigh("W1200-0012", "emergency-stop@fire:3");
        Assert.Equal(Outcome.Stopped, stopped.Decision.Outcome);
        Assert.InRange(stopped.CapturesTaken, 1, 3);

        IReadOnlyList<object?> companion = Assert.Single(QueryRunner.Run(
            _place.Evidence, "companions", new Dictionary<string, string> { ["companion"] = "W1200-0077" },
            TestContext.Current.CancellationToken).Rows);
        Assert.Equal(["W1200-0077", 2L, whole.CapturesTaken + CapturesOf(stopped), 3L], companion.Take(4));
    }

    /// <summary>Runs a device, computes the run again and holds all that is stored against it.</summary>
    private async Task<Recomputed> RunAndCompute(string fault) => Compute(await Run(fault));

    /// <summary>Computes the file's only run again and holds all that is stored against it.</summary>
    private Recomputed Compute(DeviceReport report)
    {

        using EvidenceReader evidence = EvidenceReader.Open(_place.Evidence);
        Recomputed again = Recomputed.Of(evidence, report.Run);

        Assert.Equal(
            Rows("select operating_point, capture, valid, findings, not_evaluated, load_current from captures "
                + "where operating_point <> 'zero' order by operating_point, capture"),
            again.Captures.OrderBy(one => one.Capture.OperatingPoint, StringComparer.Ordinal)
                .ThenBy(one => one.Capture.Number)
                .Select(one => Line(
                    one.Capture.OperatingPoint, (long)one.Capture.Number, one.Verdict.IsValid ? 1L : 0L,
                    Findings(one.Verdict), JsonSerializer.Serialize(one.Verdict.NotEvaluated),
                    one.Result.Train.OffCurrent)));
        Assert.Equal(
            Rows("select operating_point, capture, quantity, definition, value, reason from capture_values "
                + "order by operating_point, capture, quantity, definition"),
            again.Captures.Where(one => !UncountedPoints.Has(one.Capture.OperatingPoint))
                .SelectMany(one => one.Result.Quantities.Select(value => (one.Capture, Value: value)))
                .OrderBy(one => one.Capture.OperatingPoint, StringComparer.Ordinal).ThenBy(one => one.Capture.Number)
                .ThenBy(one => one.Value.Quantity, StringComparer.Ordinal)
                .ThenBy(one => one.Value.Definition, StringComparer.Ordinal)
                .Select(one => Line(
                    one.Capture.OperatingPoint, (long)one.Capture.Number, one.Value.Quantity, one.Value.Definition,
                    one.Value.Value, one.Value.Reason)));
        Assert.Equal(
            Rows("select operating_point, quantity, definition, value, unit, standard_uncertainty, "
                + "expanded_uncertainty, coverage_factor, degrees_of_freedom, captures, lower_limit, upper_limit, "
                + "conformity, reason from measurements order by operating_point, quantity, definition"),
            again.Decision.Values.OrderBy(value => value.OperatingPoint, StringComparer.Ordinal)
                .ThenBy(value => value.Quantity, StringComparer.Ordinal)
                .ThenBy(value => value.Definition, StringComparer.Ordinal)
                .Select(value => Line(
                    value.OperatingPoint, value.Quantity, value.Definition, value.Value, value.Unit,
                    value.StandardUncertainty, value.ExpandedUncertainty, value.CoverageFactor,
                    value.DegreesOfFreedom, (long)value.Captures, value.Lower, value.Upper, Word(value.Conformity),
                    value.Reason)));
        Assert.Equal(
            Rows("select outcome, reason from device_outcomes"),
            [Line(Word(again.Decision.Outcome), again.Decision.Reason)]);
        return again;
    }

    /// <summary>A bench that states no offset for the voltage probes.</summary>
    private async Task<DeviceReport> Run(string fault)
    {
        Sequence sequence = _place.Sequence(Limits);
        const string data = "probe: differential, rating: 1500 V, common-mode: 1500 V, bandwidth: 500 MHz, "
            + "attenuation: 100, gain: 1,";
        (string, string)[] edits =
        [
            .. ((string[])["vds_low: { scope: 2,", "vds_high: { scope: 5,", "vbus: { scope: 6,"])
                .Select(channel => ($"{channel} {data} offset: 0 V,", $"{channel} {data}")),
            .. fault.Length == 0
                ? ((string, string)[])[]
                : [("fake: { seed: 1, pace: 5 }", $"fake: {{ seed: 1, pace: 5, faults: [{fault}] }}")],
        ];
        return Assert.Single((await _place.Run(sequence, _place.Bench(edits), _heard)).Devices);
    }

    /// <summary>A device in the high place, beside a companion, by the shipped files with fewer captures.</summary>
    private async Task<DeviceReport> RunHigh(string device, string fault)
    {
        string sequence = _place.File("high.yaml");
        string bench = _place.File("negative-load.yaml");
        const string captures = "captures: { valid: 5, at-most: 20 }";
        const string fake = "fake: { seed: 1, pace: 5 }";
        Copy(Workplace.Repository("sequences", "winch-drive-high.yaml"), sequence, captures,
            "captures: { valid: 2, at-most: 8 }");
        Copy(Workplace.Repository("sequences", "benches", "negative-load.yaml"), bench, fake,
            fault.Length == 0 ? fake : $"fake: {{ seed: 1, pace: 5, faults: ['{fault}'] }}");
        RunRequest request = _place.Request(
            Workplace.Value(SequenceFile.Read(sequence)), Workplace.Value(BenchFile.Read(bench))) with
        {
            Companion = "W1200-0077",
        };
        return Assert.Single((await new RunSession(request, _heard, new Person("simulated"), TimeProvider.System)
        {
            Guardian = LivingGuardian.Start,
        }
            .Run(new Serials(device), TestContext.Current.CancellationToken)).Devices);
    }

    private static void Copy(string from, string to, string old, string replacement)
    {
        string text = File.ReadAllText(from);
        Assert.Contains(old, text, StringComparison.Ordinal);
        File.WriteAllText(to, text.Replace(old, replacement, StringComparison.Ordinal));
    }

    /// <summary>Captures in the file: a train that was stopped under way may have left none.</summary>
    private long CapturesOf(DeviceReport report) => (long)Assert.Single(QueryRunner.RunSql(
        _place.Evidence, $"select captures_taken from device_outcomes where run = '{report.Run}'",
        TestContext.Current.CancellationToken).Rows)[0]!;

    private IEnumerable<string> Rows(string sql) =>
        QueryRunner.RunSql(_place.Evidence, sql, TestContext.Current.CancellationToken).Rows
            .Select(row => Line([.. row]));

    /// <summary>Each value as its exact bits: equal texts are equal bits.</summary>
    private static string Line(params object?[] values) => string.Join(" | ", values.Select(value => value switch
    {
        null => "-",
        double number => BitConverter.DoubleToInt64Bits(number).ToString("x16", CultureInfo.InvariantCulture),
        _ => Convert.ToString(value, CultureInfo.InvariantCulture),
    }));

    private static string Findings(Verdict verdict) => JsonSerializer.Serialize(verdict.Findings.Select(finding => new
    {
        criterion = finding.Criterion,
        @class = Word(finding.Class),
        channel = finding.Channel?.Name(),
        seen = Finite(finding.Seen),
        bound = Finite(finding.Bound),
        at = Finite(finding.At),
        message = finding.Message,
    }), _readable);

    private static double? Finite(double? value) => value is { } number && double.IsFinite(number) ? number : null;

    private static string? Word<T>(T value) =>
        value is null ? null : JsonNamingPolicy.KebabCaseLower.ConvertName(value.ToString()!);
}
