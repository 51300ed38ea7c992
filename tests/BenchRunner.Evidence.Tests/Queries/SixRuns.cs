using BenchRunner.Acceptance.Decisions;
using BenchRunner.Evidence.Notes;
using BenchRunner.Evidence.Stores;
using Microsoft.Data.Sqlite;
using Microsoft.Extensions.Time.Testing;

namespace BenchRunner.Evidence.Tests.Queries;

/// <summary>Two lots, a device measured twice, a device without a lot: only read, so made once.</summary>
public sealed class SixRuns : IDisposable
{
    private readonly EvidenceFolder _folder = new();

    public SixRuns()
    {
        FakeTimeProvider clock = Samples.Clock();
        clock.AutoAdvanceAmount = TimeSpan.FromMilliseconds(10);
        using EvidenceStore store = EvidenceStore.Open(_folder.File, clock);
        FirstRun = Samples.WholeRun(store, Samples.Header("W1200-0001", "L-1"), Decided(Outcome.Accepted, 600e-6));
        Samples.WholeRun(store, Samples.Header("W1200-0002", "L-1"), Decided(Outcome.Rejected, 720e-6));
        Samples.WholeRun(store, Samples.Header("W1200-0003", "L-1"), Decided(Outcome.Accepted, 630e-6));
        Samples.WholeRun(store, Samples.Header("W1200-0004", "L-2"), Decided(Outcome.Undecided, 700e-6));
        Samples.WholeRun(store, Samples.Header("W1200-0002", "L-1", "contact"), Decided(Outcome.Accepted, 690e-6));
        Samples.WholeRun(store, Samples.Header("W1200-0005"), Decided(Outcome.Accepted, 640e-6));

        RunWriter proved = store.BeginRun(Samples.Header("W1200-0006") with { Companion = "C-17" });
        proved.AddCapture(Samples.Capture(1, "zero"));
        proved.AddCapture(Samples.Capture(1, "proving-before"));
        proved.AddHold(Samples.Hold());
        Samples.AddJudged(proved, Samples.Capture(1), Samples.Rejected);
        proved.AddCapture(Samples.Capture(2));
        proved.Stop("interlock opened");
        RunWriter going = store.BeginRun(Samples.Header("W1200-0007") with { Companion = "C-17" });
        going.AddCapture(Samples.Capture(1));
        store.BeginRun(Samples.Header("W1200-0008") with { Companion = "C-18" }).Stop("no bus");
        store.AddNote(Samples.Note());
        store.AddNote(new Note("W1200-0003", "L-1", NoteKind.Scrap, "K. Weber", "lead bent"));
    }

    public string File => _folder.File;

    public string Folder => _folder.Folder;

    public string FirstRun { get; }

    public SqliteConnection Connect() => _folder.Connect(SqliteOpenMode.ReadOnly);

    public void Dispose() => _folder.Dispose();

    private static DeviceDecision Decided(Outcome outcome, double value) => Samples.Decision(
        outcome,
        Samples.Measured(value, conformity: value > 705e-6 ? Conformity.Fails : Conformity.Conforms),
        Samples.Measured(null, "qrr", upper: null, conformity: null));
}
