using BenchRunner.Evidence.Placements;
using BenchRunner.Evidence.Stores;
using Microsoft.Data.Sqlite;

namespace BenchRunner.Evidence.Tests.Schemas;

public sealed class AppendOnlyTests : IDisposable
{
    private readonly EvidenceFolder _folder = new();

    public AppendOnlyTests()
    {
        using EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock());
        RunWriter run = store.BeginRun(Samples.Header(lot: "L-1"));
        run.AddInstrument("scope", "FAKEBENCH,SCOPE,17,1.0", "17", "1.0");
        run.AddEvent(new(Samples.Clock().GetUtcNow(), "runner", Acceptance.Events.Severity.Detail, "fire", "train 1"));
        Samples.AddJudged(run, Samples.Capture(1), Samples.Valid);
        run.AddCapture(Samples.Capture(2));
        run.AddHold(Samples.Hold());
        run.Finish(Samples.Decision());
        store.AddNote(Samples.Note());
        store.AddPlacement(new Placement(run.Run, "red bin", "K. Weber"));
    }

    public static TheoryData<string> Tables { get; } =
    [
        "origin", "word", "content", "run", "run_file", "instrument", "event", "capture", "trace", "payload", "verdict",
        "capture_value", "decision", "measurement", "seal", "hold", "acquisition", "entry", "note", "placement",
    ];

    public void Dispose() => _folder.Dispose();

    [Fact]
    public void The_tables_tried_are_all_there_are() =>
        Assert.Equal(
            Tables.Select(row => row.Data).Order(),
            _folder.Rows("select name from sqlite_schema where type = 'table' order by name")
                .Select(row => (string)row[0]!));

    [Theory]
    [MemberData(nameof(Tables))]
    public void A_row_is_never_changed_deleted_or_replaced(string table)
    {
        List<object?[]> before = _folder.Rows($"select * from {table}");
        Assert.NotEmpty(before);
        string columns = (string)_folder.Value($"select group_concat(name, ', ') from pragma_table_info('{table}')")!;
        string first = columns.Split(", ")[0];
        Refused($"update {table} set {first} = {first}", "append-only");
        Refused($"delete from {table}", "append-only");
        string replace = $"insert or replace into {table} ({columns}) select {columns} from {table}";
        Refused(replace, "is append-only|run is sealed|entry is sealed");
        Assert.Equal(before, _folder.Rows($"select * from {table}"));
    }

    [Theory]
    [InlineData("insert into event select run, 99, at, source, severity, kind, message from event")]
    [InlineData("insert into instrument (run, role, identity) select run, 'supply', 'x' from instrument")]
    [InlineData("insert into hold select run, 99, operating_point, at, bus_voltage, supply_current, first_voltage, "
        + "last_voltage, seconds, leakage, bound, conforms from hold")]
    [InlineData("insert into run_file select run, role, 'other.yaml', content from run_file limit 1")]
    [InlineData("insert into verdict (capture, scoring, valid, findings, not_evaluated) values (2, 0, 1, '', '')")]
    [InlineData("insert into measurement (run, scoring, operating_point, quantity, definition, unit, captures) "
        + "values (1, 0, 1, 1, 1, 1, 1)")]
    [InlineData("insert into trace select capture, 'vbus', offset, length, codec, samples, time_origin, "
        + "sample_interval, increment, value_origin, reference, low_rail, high_rail, sha256 from trace limit 1")]
    public void A_sealed_run_grows_no_more(string sql) => Refused(sql, "run is sealed");

    [Theory]
    [InlineData("insert into note select entry + 2, device, lot, kind, because from note", "FOREIGN KEY")]
    [InlineData("insert into placement select entry + 1, run, place from placement", "FOREIGN KEY")]
    [InlineData("insert into entry select id + 2, 'x', origin, ordinal - 1, kind, at, author from entry", "sealed")]
    public void A_sealed_entry_grows_no_more(string sql, string pattern) =>
        Refused("pragma foreign_keys = on; " + sql, pattern);

    [Fact]
    public void A_later_scoring_of_a_sealed_run_is_added() => _folder.Write(
        """
        insert into decision (run, scoring, outcome, captures_taken, captures_valid, sequence, sequence_revision,
          sequence_content, algorithm, platform, scored_at)
        select run, 1, 'rejected', captures_taken, captures_valid, sequence, sequence_revision, sequence_content,
          algorithm, platform, scored_at from decision
        """);

    private void Refused(string sql, string pattern) =>
        Assert.Matches(pattern, Assert.Throws<SqliteException>(() => _folder.Write(sql)).Message);
}
