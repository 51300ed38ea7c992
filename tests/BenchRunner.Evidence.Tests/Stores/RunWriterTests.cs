using System.Collections;
using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Evidence.Stores;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Evidence.Tests.Stores;

public sealed class RunWriterTests : IDisposable
{
    private readonly EvidenceFolder _folder = new();

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void A_finished_run_stands_in_every_view()
    {
        using (EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock()))
        {
            Samples.WholeRun(store, Samples.Header(lot: "L-7"));
        }

        object?[] outcome = Assert.Single(_folder.Rows(
            """
            select device, lot, attempt, scoring, current, outcome, captures_taken, captures_valid, finished_at
            from device_outcomes
            """));
        Assert.Equal(["W1200-0001", "L-7", 1L, 0L, 1L, "accepted", 2L, 1L, "2026-03-02T08:00:00.000Z"], outcome);
        object?[] measured = Assert.Single(_folder.Rows(
            """
            select quantity, value, unit, degrees_of_freedom, upper_limit, lower_limit, conformity, current
            from measurements
            """));
        Assert.Equal(["eon", 650e-6, "J", double.PositiveInfinity, 705e-6, null, "conforms", 1L], measured);
        Assert.Equal(
            [["zero", null, null], ["rated", 0L, 40.3], ["rated", 1L, 40.3]],
            _folder.Rows("select operating_point, valid, load_current from captures"));
        Assert.Equal(4, _folder.Rows("select * from capture_values").Count);
        Assert.Equal(["scope", "17"], Assert.Single(_folder.Rows("select role, serial from instruments")));
        Assert.Equal(
            ["L-7", 1L, 1L, 1.0],
            Assert.Single(_folder.Rows("select lot, devices, accepted, first_pass_yield from lot_yield")));
    }

    [Fact]
    public void Events_are_kept_in_their_order_with_the_next_commit()
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        RunWriter run = store.BeginRun(Samples.Header());
        DateTimeOffset now = Samples.Clock().GetUtcNow();
        run.AddEvent(new BenchEvent(now, "watch", Severity.Warning, "late", "second line\nforged"));
        run.AddEvent(new BenchEvent(now, "runner", Severity.Detail, "fire", "train 1"));
        Assert.Empty(_folder.Rows("select * from events"));
        run.AddCapture(Samples.Capture(1));
        Assert.Equal(
            [["watch", "warning", "late"], ["runner", "detail", "fire"]],
            _folder.Rows("select source, severity, kind from events"));
    }

    [Fact]
    public void A_stopped_run_has_an_outcome_and_no_measurements()
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        RunWriter run = store.BeginRun(Samples.Header());
        run.AddCapture(Samples.Capture(1));
        run.Stop("interlock opened");
        Assert.Equal(
            ["stopped", "interlock opened"],
            Assert.Single(_folder.Rows("select outcome, reason from device_outcomes")));
        Assert.Empty(_folder.Rows("select * from measurements"));
        Assert.Throws<InvalidOperationException>(() => run.AddCapture(Samples.Capture(2)));
    }

    [Fact]
    public void Zero_and_proving_captures_are_shown_but_neither_counted_nor_measured()
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        RunWriter run = store.BeginRun(Samples.Header());
        string[] apart = [UncountedPoints.Zero, UncountedPoints.ProvingBefore, UncountedPoints.ProvingAfter];
        foreach (string point in apart)
        {
            Samples.AddJudged(run, Samples.Capture(1, point), Samples.Valid);
            Assert.Throws<ArgumentException>(
                () => run.Finish(Samples.Decision(Outcome.Accepted, Samples.Measured(650e-6, point: point))));
        }

        Samples.AddJudged(run, Samples.Capture(1), Samples.Valid);
        Samples.AddJudged(run, Samples.Capture(2), Samples.Rejected);
        run.Finish(Samples.Decision());

        Assert.Equal(
            [.. apart.Select(point => new object?[] { point, 1L, 1L }), ["rated", 1L, 1L], ["rated", 2L, 0L]],
            _folder.Rows("select operating_point, capture, valid from captures"));
        Assert.Equal([[2L, 1L]], _folder.Rows("select captures_taken, captures_valid from device_outcomes"));
        Assert.Equal([["rated"]], _folder.Rows("select operating_point from measurements"));
    }

    [Fact]
    public void A_leakage_hold_is_in_the_file_when_it_was_added()
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        RunWriter run = store.BeginRun(Samples.Header(lot: "L-7"));
        run.AddHold(Samples.Hold());
        run.AddHold(Samples.Hold(supplyCurrent: null, bound: null) with { OperatingPoint = "high", Conforms = false });
        Assert.Throws<ArgumentException>(() => run.AddHold(Samples.Hold() with { Leakage = double.NaN }));
        string at = "2026-03-02T08:00:00.000Z";
        Assert.Equal(
            [
                [run.Run, "W1200-0001", "L-7", "rated", at, 600.0, 1.2e-3, 599.8, 597.1, 0.1, 1.25e-3, 2e-3, 1L, 1L],
                [run.Run, "W1200-0001", "L-7", "high", at, 600.0, null, 599.8, 597.1, 0.1, 1.25e-3, null, 0L, 1L],
            ],
            _folder.Rows("select * from leakage_holds"));
        run.Finish(Samples.Decision());
        Assert.Throws<InvalidOperationException>(() => run.AddHold(Samples.Hold()));
    }

    [Fact]
    public void A_NaN_is_refused_and_the_run_goes_on()
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        RunWriter run = store.BeginRun(Samples.Header());
        DeviceDecision decision = Samples.Decision(Outcome.Accepted, Samples.Measured(double.NaN));
        Assert.Throws<ArgumentException>(() => run.Finish(decision));
        run.Finish(Samples.Decision());
        Assert.Equal("accepted", _folder.Value("select outcome from device_outcomes"));
    }

    [Fact]
    public void What_a_run_has_already_is_refused_and_the_run_goes_on()
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        RunWriter run = store.BeginRun(Samples.Header());
        run.AddInstrument("scope", "x", null, null);
        long capture = run.AddCapture(Samples.Capture(1));
        run.AddVerdict(capture, Samples.Valid, null, null);
        run.AddCaptureValues(capture, Samples.Values);
        RawTrace unscaled = Samples.Trace(Channel.Vbus, 1) with { Increment = double.NaN };
        DeviceDecision twice = Samples.Decision(Outcome.Accepted, Samples.Measured(1), Samples.Measured(2));
        Assert.Throws<ArgumentException>(() => run.AddInstrument("scope", "y", null, null));
        Assert.Throws<ArgumentException>(() => run.AddCapture(Samples.Capture(1)));
        Assert.Throws<ArgumentException>(() => run.AddCapture(Samples.Capture(2) with { Traces = [unscaled] }));
        Assert.Throws<ArgumentException>(() => run.AddVerdict(capture, Samples.Rejected, null, null));
        Assert.Throws<ArgumentException>(() => run.AddVerdict(capture + 1, Samples.Valid, null, null));
        Assert.Throws<ArgumentException>(() => run.AddCaptureValues(capture, []));
        Assert.Throws<ArgumentException>(() => run.Finish(twice));
        run.Finish(Samples.Decision());
        Assert.Equal(["accepted", 1L, 1L], Assert.Single(_folder.Rows(
            "select outcome, captures_taken, captures_valid from device_outcomes")));
    }

    [Fact]
    public void A_dialect_that_serves_two_roles_is_stored_once()
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        SourceFile dialect = new("dialect", "generic.yaml", [.. "format: 1\n"u8]);
        SourceFile changed = new("dialect", "generic.yaml", [.. "format: 1\nrole: scope\n"u8]);
        store.BeginRun(Samples.Header() with { Files = [dialect, dialect, changed] }).Stop("enough");
        Assert.Equal(3, _folder.Rows("select * from run_file").Count);
    }

    [Fact]
    public void What_waits_is_kept_when_the_file_is_closed_without_an_end()
    {
        using (EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock()))
        {
            store.BeginRun(Samples.Header()).AddEvent(
                new BenchEvent(Samples.Clock().GetUtcNow(), "runner", Severity.Error, "fault", "it fell over"));
        }

        Assert.Equal("it fell over", _folder.Value("select message from events"));
    }

    [Fact]
    public void An_event_that_comes_while_the_run_is_being_sealed_spoils_neither_this_run_nor_the_next()
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        RunWriter run = store.BeginRun(Samples.Header());
        BenchEvent poll = new(Samples.Clock().GetUtcNow(), "watch", Severity.Detail, "poll", "closed");
        Interrupted values = new([Samples.Measured(650e-6)], () => run.AddEvent(poll));
        run.Finish(new DeviceDecision(Outcome.Accepted, null, values));
        Assert.Throws<InvalidOperationException>(() => run.AddEvent(poll));
        Samples.WholeRun(store, Samples.Header("W1200-0002"));
        Assert.Equal([["accepted"], ["accepted"]], _folder.Rows("select outcome from device_outcomes"));
    }

    /// <summary>Values during whose reading something else happens, as on another thread: also inside the
    /// transaction.</summary>
    private sealed class Interrupted(MeasuredValue[] values, Action happens) : IReadOnlyList<MeasuredValue>
    {
        public int Count => values.Length;

        public MeasuredValue this[int index] => values[index];

        public IEnumerator<MeasuredValue> GetEnumerator()
        {
            happens();
            return ((IEnumerable<MeasuredValue>)values).GetEnumerator();
        }

        IEnumerator IEnumerable.GetEnumerator() => GetEnumerator();
    }
}
