using BenchRunner.Acceptance.Decisions;
using BenchRunner.Evidence.Audits;
using BenchRunner.Evidence.Entries;
using BenchRunner.Evidence.Placements;
using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Tests.Placements;

public sealed class PlacementTests : IDisposable
{
    private readonly EvidenceFolder _folder = new();

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void A_placement_is_sealed_behind_its_run_and_changes_no_outcome()
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        Samples.WholeRun(store, Samples.Header(), Samples.Decision(Outcome.Rejected));
        string run = (string)_folder.Value("select run from device_outcomes")!;

        SealedEntry entry = store.AddPlacement(new Placement(run, "red bin 3", "K. Weber"));

        Assert.Equal(
            [[run, "W1200-0001", "red bin 3", "K. Weber", entry.Entry]],
            _folder.Rows("select run, device, place, author, entry from placements"));
        Assert.Equal("rejected", _folder.Value("select outcome from device_outcomes"));
        Assert.Equal([["run"], ["entry"]], _folder.Rows("select kind from seal order by ordinal"));
        Assert.Empty(
            EvidenceAudit.Verify(_folder.File, entry.Seal, TestContext.Current.CancellationToken).Problems);
    }

    [Theory]
    [InlineData("update placement set place = 'green bin'")]
    [InlineData("update placement set run = (select max(id) from run)")]
    [InlineData("delete from placement")]
    [InlineData("update entry set author = 'A. Other' where kind = 'placement'")]
    public void A_placement_that_was_altered_by_hand_is_found(string sql)
    {
        using (EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock()))
        {
            string run = Samples.WholeRun(store, Samples.Header(), Samples.Decision(Outcome.Rejected));
            Samples.WholeRun(store, Samples.Header("W1200-0002"));
            store.AddPlacement(new Placement(run, "red bin 3", "K. Weber"));
        }

        List<object?[]> triggers = _folder.Rows("select name, sql from sqlite_schema where type = 'trigger'");
        _folder.Write(string.Concat(triggers.Select(trigger => $"drop trigger {trigger[0]};")) + sql + ";"
            + string.Concat(triggers.Select(trigger => $"{trigger[1]};")));

        Assert.Equal("seal", Assert.Single(
            EvidenceAudit.Verify(_folder.File, null, TestContext.Current.CancellationToken).Problems).What);
    }

    [Theory]
    [InlineData("no-such-run", "bin", "K. Weber")]
    [InlineData(null, " ", "K. Weber")]
    [InlineData(null, "bin", "")]
    public void A_placement_without_run_place_or_name_is_a_callers_mistake(string? run, string place, string by)
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        Samples.WholeRun(store, Samples.Header());
        run ??= (string)_folder.Value("select run from device_outcomes")!;

        Assert.Throws<ArgumentException>(() => store.AddPlacement(new Placement(run, place, by)));
        Assert.Empty(_folder.Rows("select * from placements"));
    }
}
