using BenchRunner.Acceptance.Decisions;
using BenchRunner.Acceptance.Events;
using BenchRunner.Evidence.Stores;

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
            "select device, lot, attempt, scoring, current, outcome, captures_taken, captures_valid, finished_at from device_outcomes"));
        Assert.Equal(["W1200-0001", "L-7", 1L, 0L, 1L, "accepted", 2L, 1L, "2026-03-02T08:00:00.000Z"], outcome);
        object?[] measured = Assert.Single(_folder.Rows(
            "select quantity, value, unit, degrees_of_freedom, upper_limit, lower_limit, conformity, current from measurements"));
        Assert.Equal(["eon", 650e-6, "J", double.PositiveInfinity, 705e-6, null, "conforms", 1L], measured);
        Assert.Equal(
            [["zero", null, null], ["rated", 0L, 40.3], ["rated", 1L, 40.3]],
            _folder.Rows("select operating_point, valid, load_current from captures"));
        Assert.Equal(4, _folder.Rows("select * from capture_values").Count);
        Assert.Equal(["scope", "17"], Assert.Single(_folder.Rows("select role, serial from instruments")));
        Assert.Equal(["L-7", 1L, 1L, 1.0], Assert.Single(_folder.Rows("select lot, devices, accepted, first_pass_yield from lot_yield")));
    }

    [Fact]
    public void Events_are_kept_in_their_order_with_the_next_commit()
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        RunWriter run = store.BeginRun(Samples.Header());
        run.AddEvent(new BenchEvent(Samples.Clock().GetUtcNow(), "watch", Severity.Warning, "late", "second line\nforged"));
        run.AddEvent(new BenchEvent(Samples.Clock().GetUtcNow(), "runner", Severity.Detail, "fire", "train 1"));
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
        Assert.Equal(["stopped", "interlock opened"], Assert.Single(_folder.Rows("select outcome, reason from device_outcomes")));
        Assert.Empty(_folder.Rows("select * from measurements"));
        Assert.Throws<InvalidOperationException>(() => run.AddCapture(Samples.Capture(2)));
    }

    [Fact]
    public void A_NaN_is_refused_and_the_run_goes_on()
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        RunWriter run = store.BeginRun(Samples.Header());
        Assert.Throws<ArgumentException>(() => run.Finish(Samples.Decision(Outcome.Accepted, Samples.Measured(double.NaN))));
        run.Finish(Samples.Decision());
        Assert.Equal("accepted", _folder.Value("select outcome from device_outcomes"));
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
    public void Events_from_other_threads_while_runs_end_never_spoil_the_file()
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        for (int i = 0; i < 20; i++)
        {
            RunWriter run = store.BeginRun(Samples.Header());
            using ManualResetEventSlim started = new();
            Thread watch = new(() =>
            {
                started.Set();
                try
                {
                    for (int n = 0; n < 3000; n++)
                    {
                        run.AddEvent(new BenchEvent(Samples.Clock().GetUtcNow(), "watch", Severity.Detail, "poll", "closed"));
                    }
                }
                catch (InvalidOperationException)
                {
                    // The run has ended.
                }
            });
            watch.Start();
            started.Wait(TestContext.Current.CancellationToken);
            run.Finish(Samples.Decision());
            watch.Join();
        }

        Assert.Equal(20, _folder.Rows("select * from device_outcomes where outcome = 'accepted'").Count);
    }
}
