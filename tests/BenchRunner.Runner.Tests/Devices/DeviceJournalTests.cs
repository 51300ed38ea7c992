using BenchRunner.Acceptance.Events;
using BenchRunner.Evidence.Stores;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Tests.Workplaces;

namespace BenchRunner.Runner.Tests.Devices;

public sealed class DeviceJournalTests : IDisposable
{
    private readonly Workplace _place = new();
    private readonly RecordingSink _heard = new();

    public void Dispose() => _place.Dispose();

    [Fact]
    public void An_event_goes_into_the_evidence_of_the_run_that_is_open_and_to_the_sinks()
    {
        var journal = new DeviceJournal(_heard);
        using (EvidenceStore store = EvidenceStore.Open(_place.Evidence, TimeProvider.System))
        {
            RunWriter run = Begin(store);
            journal.Receive(Event("before"));
            journal.Follow(run);
            journal.Receive(Event("during"));
            journal.Follow(null);
            journal.Receive(Event("after"));
            run.Stop("the test ends it");
        }

        Assert.Equal(["before", "during", "after"], _heard.Events.Select(happened => happened.Kind));
        Assert.Equal("during", _place.Ask<string>("select group_concat(kind) from events"));
    }

    [Fact]
    public void An_event_that_the_evidence_does_not_take_still_reaches_the_sinks_and_throws_at_nobody()
    {
        var journal = new DeviceJournal(_heard);
        using EvidenceStore store = EvidenceStore.Open(_place.Evidence, TimeProvider.System);
        RunWriter run = Begin(store);
        journal.Follow(run);
        run.Stop("the test ends it");

        journal.Receive(Event("too-late"));

        Assert.Equal(["event-not-stored", "too-late"], _heard.Events.Select(happened => happened.Kind));
        Assert.Equal((Severity.Error, "evidence"), (_heard.Events[0].Severity, _heard.Events[0].Source));
    }

    private static BenchEvent Event(string kind) =>
        new(DateTimeOffset.UnixEpoch, "runner", Severity.Information, kind, "a message");

    private RunWriter Begin(EvidenceStore store) => store.BeginRun(new RunHeader
    {
        Device = Workplace.Device,
        Sequence = _place.Sequence("limits:\n  - { quantity: eon, at: half, at-most: 1 mJ }"),
        Bench = "fake",
        Simulated = true,
        Algorithm = "1",
        Platform = "test",
    });
}
