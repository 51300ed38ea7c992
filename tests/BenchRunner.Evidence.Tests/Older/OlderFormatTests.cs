using System.IO.Compression;
using BenchRunner.Evidence.Audits;
using BenchRunner.Evidence.Captures;
using BenchRunner.Evidence.Queries;
using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Tests.Older;

/// <summary>A file that the program of format 1 has written (four runs, the last with companion C-17) is read as it is,
/// and brought to this format before it is written.</summary>
public sealed class OlderFormatTests : IDisposable
{
    private readonly EvidenceFolder _folder = new();
    private readonly CancellationToken _cancel = TestContext.Current.CancellationToken;

    public OlderFormatTests()
    {
        using FileStream packed =
            File.OpenRead(Path.Combine(AppContext.BaseDirectory, "Older", "format-1.db.gz"));
        using GZipStream whole = new(packed, CompressionMode.Decompress);
        using FileStream file = File.Create(_folder.File);
        whole.CopyTo(file);
    }

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void It_is_audited_asked_and_read_as_it_is()
    {
        byte[] before = File.ReadAllBytes(_folder.File);
        AuditReport report = EvidenceAudit.Verify(_folder.File, cancel: _cancel);
        Assert.Empty(report.Problems);
        Assert.Equal((4, 12), (report.Runs, report.Captures));
        Assert.Equal(2, Ask("lot-devices", "lot", "L-1").Rows.Count);
        Assert.Equal(["C-17", 1L, 2L, 0L], Assert.Single(Ask("companions", "companion", "C-17").Rows).Take(4));
        string run = (string)Ask("last-runs", "limit", "1").Rows[0][1]!;
        using (EvidenceReader reader = EvidenceReader.Open(_folder.File))
        {
            Assert.Equal(3, reader.Captures(run).Count);
        }

        Assert.Equal(before, File.ReadAllBytes(_folder.File));
    }

    [Fact]
    public void What_it_cannot_hold_is_not_there()
    {
        Assert.Empty(Ask("notes", "lot", "L-1").Rows);
        Assert.Empty(QueryRunner.RunSql(_folder.File, "select * from leakage_holds", _cancel).Rows);
    }

    [Fact]
    public void Tampering_is_found_in_it()
    {
        _folder.Write(
            "drop trigger decision_is_never_changed; update decision set outcome = 'accepted' where run = 2");
        Assert.Equal(
            ["schema", "seal"],
            EvidenceAudit.Verify(_folder.File, cancel: _cancel).Problems.Select(problem => problem.What));
    }

    [Fact]
    public void A_writer_brings_it_to_this_format_and_its_seals_stand()
    {
        List<object?[]> seals = _folder.Rows("select * from seal");
        using (EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock()))
        {
            Assert.Empty(store.Closed);
            store.AddNote(Samples.Note());
            Samples.WholeRun(store, Samples.Header("W1200-0004", "L-1"));
        }

        Assert.Equal(2L, _folder.Value("pragma user_version"));
        Assert.Equal(seals, _folder.Rows("select * from seal where ordinal <= 4"));
        Assert.Empty(EvidenceAudit.Verify(_folder.File, (string)seals[^1][^1]!, _cancel).Problems);
        Assert.Single(Ask("notes", "lot", "L-1").Rows);

        using EvidenceFolder fresh = new();
        EvidenceStore.Open(fresh.File, Samples.Clock()).Dispose();
        const string form = "select type, name, sql from sqlite_schema order by type, name";
        Assert.Equal(fresh.Rows(form), _folder.Rows(form));
    }

    private QueryTable Ask(string name, string filter, string value) =>
        QueryRunner.Run(_folder.File, name, new Dictionary<string, string> { [filter] = value }, _cancel);
}
