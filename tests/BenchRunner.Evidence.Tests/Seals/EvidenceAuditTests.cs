using BenchRunner.Evidence.Audits;
using Microsoft.Data.Sqlite;

namespace BenchRunner.Evidence.Tests.Seals;

/// <summary>Whatever somebody with another tool does to a file, the audit finds.</summary>
public sealed class EvidenceAuditTests : IClassFixture<ThreeRuns>, IDisposable
{
    private readonly EvidenceFolder _folder = new();
    private readonly IReadOnlyList<string> _runs;

    public EvidenceAuditTests(ThreeRuns three)
    {
        ArgumentNullException.ThrowIfNull(three);
        File.WriteAllBytes(_folder.File, three.File);
        _runs = three.Runs;
    }

    /// <summary>What is done, and the word of the problem found.</summary>
    public static TheoryData<string, string> Tampering { get; } = new()
    {
        { "update measurement set value = 600e-6", "seal" },
        { "update measurement set upper_limit = 800e-6 where run = 2", "seal" },
        { "update measurement set value = (select m.value from measurement m where m.run = 3) where run = 1", "seal" },
        { "update decision set outcome = 'rejected' where run = 1", "seal" },
        { "update run set device = 'W1200-0009' where id = 2", "seal" },
        { "update word set text = 'qrr' || id where text = 'eon'", "seal" },
        { "update capture set bus_voltage = 601 where id = 4", "seal" },
        { "update trace set increment = 0.41 where capture = 4", "seal" },
        { "update capture_value set value = 1e-3 where value is not null", "seal" },
        { "update verdict set valid = 1", "seal" },
        { "update instrument set serial = '18'", "seal" },
        { "delete from measurement where run = 1", "seal" },
        { "delete from instrument where run = 3", "seal" },
        { "delete from payload where capture = 2", "payload" },
        { "update payload set bytes = (select bytes from payload p where p.capture = 3) where capture = 2", "payload" },
        { "update content set bytes = x'00' where id = 1", "file" },
        { "update seal set sealed_at = '2026-03-02T08:00:01.000Z' where ordinal = 2", "seal" },
        {
            "update seal set run = null where run = 2; update seal set run = 2 where run = 3; "
            + "update seal set run = 3 where run is null",
            "seal"
        },
        { "delete from seal where ordinal = 1", "chain" },
        { "delete from seal where ordinal = 2", "chain" },
        { "delete from seal where ordinal = 3", "unfinished" },
        { "update seal set ordinal = 9 where ordinal = 3", "chain" },
        { "insert into event values (2, 7, '2026-03-02T08:00:00.000Z', 'watch', 'alarm', 'trip', 'invented')", "seal" },
        {
            "insert into decision select run, 1, 'rejected', reason, 0, 0, sequence, sequence_revision, "
            + "sequence_content, algorithm, platform, scored_at from decision where run = 1",
            "unsealed"
        },
        { "update hold set leakage = 1e-6 where run = 2", "seal" },
        { "update hold set conforms = 0 where run = 1", "seal" },
        { "delete from hold where run = 3", "seal" },
        { "update acquisition set count_after = 7 where capture = 2", "seal" },
        { "delete from acquisition where capture = 6", "seal" },
        { "update note set kind = 'scrap'", "seal" },
        { "update note set because = 'none'", "seal" },
        { "update entry set author = 'A. Other'", "seal" },
        { "update entry set ordinal = 9", "unsealed" },
        { "delete from note", "seal" },
        { "delete from note; delete from entry", "seal" },
        { "delete from note; delete from entry; delete from seal where kind = 'entry' and ordinal = 3", "seal" },
        { "delete from seal where ordinal = 4", "unsealed" },
        { "insert into entry values (9, 'x', 1, 9, 'note', '2026-03-02T08:00:00.000Z', 'A. Other')", "unsealed" },
        { "drop view lot_yield; create view lot_yield as select 1 as devices", "schema" },
    };

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void An_untouched_file_verifies()
    {
        AuditReport report = Audit();
        Assert.Empty(report.Problems);
        Assert.Equal((true, 3, 9), (report.Ok, report.Runs, report.Captures));
        Assert.Equal([_folder.Value("select seal from seal order by ordinal desc limit 1")], report.LastSeals);
    }

    [Theory]
    [MemberData(nameof(Tampering))]
    public void What_was_done_past_the_triggers_is_found(string sql, string what)
    {
        // The triggers are dropped first and put back, so that nothing but the rows tells.
        List<object?[]> triggers = _folder.Rows("select name, sql from sqlite_schema where type = 'trigger'");
        string drop = string.Concat(triggers.Select(trigger => $"drop trigger {trigger[0]};"));
        string restore = string.Concat(triggers.Select(trigger => $"{trigger[1]};"));
        _folder.Write($"pragma foreign_keys = off; {drop} {sql}; {restore}");
        Assert.Contains(what, Audit().Problems.Select(problem => problem.What));
    }

    [Fact]
    public void A_byte_altered_by_an_incremental_blob_write_is_found_though_no_trigger_fires()
    {
        using (SqliteConnection connection = _folder.Connect(SqliteOpenMode.ReadWrite))
        using (SqliteBlob blob = new(connection, "payload", "bytes", 5))
        {
            blob.Position = 100;
            int before = blob.ReadByte();
            blob.Position = 100;
            blob.WriteByte((byte)(before ^ 1));
        }

        AuditProblem problem = Assert.Single(Audit().Problems);
        Assert.Equal((_runs[1], "payload"), (problem.Run, problem.What));
    }

    [Fact]
    public void Runs_cut_off_the_end_are_found_by_a_seal_kept_outside()
    {
        string last = Assert.Single(Audit().LastSeals);
        _folder.Write("pragma foreign_keys = off;" + string.Concat(
            _folder.Rows("select name from sqlite_schema where type = 'trigger' and name like '%deleted'")
                .Select(trigger => $"drop trigger {trigger[0]};")));
        _folder.Write(
            """
            pragma foreign_keys = off;
            delete from trace where capture > 6; delete from payload where capture > 6;
            delete from acquisition where capture > 6;
            delete from verdict where capture > 6; delete from capture_value where capture > 6;
            delete from capture where run = 3; delete from measurement where run = 3;
            delete from decision where run = 3; delete from instrument where run = 3;
            delete from run_file where run = 3; delete from hold where run = 3;
            delete from note; delete from entry; delete from seal where ordinal > 2;
            delete from run where id = 3;
            """);
        Assert.All(Audit().Problems, problem => Assert.Equal("schema", problem.What));
        Assert.Contains("chain", EvidenceAudit.Verify(_folder.File, last, TestContext.Current.CancellationToken)
            .Problems.Select(problem => problem.What));
    }

    [Fact]
    public void Any_single_altered_byte_of_the_file_is_found_or_lies_in_nothing_that_is_stored()
    {
        byte[] whole = File.ReadAllBytes(_folder.File);
        List<object?[]> stored = Dump();
        Random random = new(20260302);
        int found = 0;
        for (int i = 0; i < 150; i++)
        {
            byte[] altered = [.. whole];
            altered[random.Next(altered.Length)] ^= (byte)(1 << random.Next(8));
            File.WriteAllBytes(_folder.File, altered);
            if (Finds())
            {
                found++;
            }
            else
            {
                Assert.Equal(stored, Dump());
            }
        }

        Assert.InRange(found, 10, 150);
    }

    private bool Finds()
    {
        try
        {
            return !Audit().Ok;
        }
        catch (EvidenceException)
        {
            return true; // Not even an evidence file any more.
        }
    }

    private List<object?[]> Dump() =>
    [
        .. _folder.Rows("select * from device_outcomes"), .. _folder.Rows("select * from measurements"),
        .. _folder.Rows("select * from captures"), .. _folder.Rows("select * from capture_values"),
        .. _folder.Rows("select * from payload"), .. _folder.Rows("select * from content"),
        .. _folder.Rows("select * from instruments"), .. _folder.Rows("select * from lot_yield"),
        .. _folder.Rows("select * from leakage_holds"), .. _folder.Rows("select * from notes"),
    ];

    private AuditReport Audit() => EvidenceAudit.Verify(_folder.File, cancel: TestContext.Current.CancellationToken);
}
