using BenchRunner.Acceptance.Decisions;
using BenchRunner.Evidence.Audits;
using BenchRunner.Evidence.Entries;
using BenchRunner.Evidence.Notes;
using BenchRunner.Evidence.Stores;
using Microsoft.Extensions.Time.Testing;

namespace BenchRunner.Evidence.Tests.Notes;

public sealed class NoteTests : IDisposable
{
    private readonly EvidenceFolder _folder = new();

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void A_note_is_sealed_behind_the_runs_and_the_next_run_behind_it()
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        Samples.WholeRun(store, Samples.Header(lot: "L-1"));
        SealedEntry note = store.AddNote(new Note("W1200-0001", "L-1", NoteKind.Scrap, "K. Weber", "lead bent"));
        Samples.WholeRun(store, Samples.Header("W1200-0002", "L-1"));

        Assert.Equal(
            [["2026-03-02T08:00:00.000Z", "W1200-0001", "L-1", "scrap", "K. Weber", "lead bent", note.Entry]],
            _folder.Rows("select * from notes"));
        Assert.Equal(7, Guid.Parse(note.Entry).Version);
        Assert.Equal([["run"], ["entry"], ["run"]], _folder.Rows("select kind from seal order by ordinal"));
        Assert.Equal(note.Seal, _folder.Value("select previous from seal where ordinal = 3"));
        Assert.Empty(
            EvidenceAudit.Verify(_folder.File, note.Seal, TestContext.Current.CancellationToken).Problems);
    }

    [Fact]
    public void Notes_of_every_kind_change_no_outcome_no_yield_and_no_attempt()
    {
        FakeTimeProvider clock = Samples.Clock();
        clock.AutoAdvanceAmount = TimeSpan.FromMilliseconds(10);
        using EvidenceStore store = EvidenceStore.Open(_folder.File, clock);
        Samples.WholeRun(store, Samples.Header(lot: "L-1"), Samples.Decision(Outcome.Rejected));
        Samples.WholeRun(store, Samples.Header("W1200-0002", "L-1"));
        const string outcomes = "select * from device_outcomes";
        const string yield = "select * from lot_yield";
        List<object?[]> before = [.. _folder.Rows(outcomes), .. _folder.Rows(yield)];
        foreach (NoteKind kind in Enum.GetValues<NoteKind>())
        {
            store.AddNote(new Note("W1200-0001", "L-1", kind, "K. Weber", "as agreed"));
        }

        Assert.Equal(before, [.. _folder.Rows(outcomes), .. _folder.Rows(yield)]);
        Assert.Equal(RunRefusalKind.AlreadyDecided, store.Refuses(Samples.Header(lot: "L-1"))?.Kind);
        Assert.Equal(
            [["release"], ["scrap"], ["return"], ["concession"]], _folder.Rows("select kind from notes order by at"));
    }

    [Theory]
    [InlineData("W1200-0009", "L-1", "K. Weber", "shipped", "W1200-0009 has no run in lot L-1")]
    [InlineData("W1200-0001", "L-2", "K. Weber", "shipped", "W1200-0001 has no run in lot L-2")]
    [InlineData("W1200-0001", "L-1", " ", "shipped", "who says so is empty")]
    [InlineData("W1200-0001", "L-1", "K. Weber", "", "the reason is empty")]
    public void A_note_of_nobody_about_nothing_or_of_a_device_not_in_the_lot_is_refused(
        string device, string lot, string by, string because, string said)
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        Samples.WholeRun(store, Samples.Header(lot: "L-1"));
        NoteRefusedException refused = Assert.Throws<NoteRefusedException>(
            () => store.AddNote(new Note(device, lot, NoteKind.Release, by, because)));
        Assert.Contains(said, refused.Message, StringComparison.Ordinal);
        Assert.Throws<NoteRefusedException>(
            () => store.AddNote(Samples.Note() with { Because = new string('x', Note.LongestText + 1) }));
        Assert.Empty(_folder.Rows("select * from notes"));
        store.AddNote(Samples.Note());
    }
}
