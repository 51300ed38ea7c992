using System.Diagnostics;
using BenchRunner.Evidence.Stores;

namespace BenchRunner.Evidence.Tests.Schemas;

/// <summary>Names and columns of the views are a contract with other programs: columns may be added, never
/// lost.</summary>
public sealed class ViewTests : IDisposable
{
    private readonly EvidenceFolder _folder = new();

    public static TheoryData<string, string> Contract { get; } = new()
    {
        {
            "device_outcomes",
            "run, device, lot, part, position, companion, sequence, sequence_revision, sequence_sha256, bench, " +
            "simulated, operator, attempt, scoring, current, started_at, finished_at, outcome, captures_taken, " +
            "captures_valid, reason"
        },
        {
            "measurements",
            "run, device, lot, operating_point, quantity, definition, value, unit, standard_uncertainty, " +
            "expanded_uncertainty, coverage_factor, degrees_of_freedom, captures, lower_limit, upper_limit, " +
            "conformity, reason, scoring, current, simulated, scored_at, algorithm, platform"
        },
        {
            "captures",
            "run, device, operating_point, capture, taken_at, valid, findings, not_evaluated, bus_voltage, " +
            "load_current, temperature, channels, samples, raw_bytes, stored_bytes, simulated"
        },
        { "capture_values", "run, device, operating_point, capture, quantity, definition, value, reason" },
        { "instruments", "run, role, identity, serial, firmware, calibrated_at, due_at, certificate" },
        { "events", "run, at, source, severity, kind, message" },
        {
            "lot_yield",
            "lot, part, sequence, devices, accepted, rejected, undecided, not_measured, stopped, first_pass_yield"
        },
        {
            "leakage_holds",
            "run, device, lot, operating_point, at, bus_voltage, supply_current, first_voltage, last_voltage, " +
            "seconds, leakage, bound, conforms, simulated"
        },
        { "acquisitions", "run, device, operating_point, capture, count_before, count_after, simulated" },
        { "notes", "at, device, lot, kind, author, because, entry" },
        { "placements", "at, run, device, lot, place, author, entry" },
        { "companions", "companion, runs, captures_taken, proving_captures, last_started_at" },
    };

    public void Dispose() => _folder.Dispose();

    [Theory]
    [MemberData(nameof(Contract))]
    public void A_view_has_its_columns(string view, string columns)
    {
        EvidenceStore.Open(_folder.File, Samples.Clock()).Dispose();
        Assert.Equal(
            columns.Split(", "), _folder.Rows($"select name from pragma_table_info('{view}')").Select(row => row[0]));
    }

    [Fact]
    public void There_are_no_other_views()
    {
        EvidenceStore.Open(_folder.File, Samples.Clock()).Dispose();
        Assert.Equal(
            Contract.Select(row => row.Data.Item1).Order(),
            _folder.Rows("select name from sqlite_schema where type = 'view' order by name")
                .Select(row => (string)row[0]!));
    }

    [Fact]
    public void The_systems_own_SQLite_answers_every_view_as_we_do()
    {
        // Peer: the sqlite3 command of the system, any version from 3.40 on (Debian 12 has 3.40.1).
        Assert.SkipUnless(File.Exists("/usr/bin/sqlite3"), "sqlite3 is not installed (apt: sqlite3)");
        using (EvidenceStore store = EvidenceStore.Open(_folder.File, Samples.Clock()))
        {
            Samples.WholeRun(store, Samples.Header(lot: "L-1"));
            Samples.WholeRun(store, Samples.Header("W1200-0002", "L-1") with { Companion = "C-17" });
            store.AddNote(Samples.Note());
        }

        foreach (string view in Contract.Select(row => row.Data.Item1))
        {
            string[] answer = Sqlite($"select * from {view}").Split('\n', StringSplitOptions.RemoveEmptyEntries);
            List<object?[]> ours = _folder.Rows($"select * from {view}");
            Assert.Equal(ours.Count, answer.Length);
            Assert.Equal(ours.Select(row => (string)row[0]!), answer.Select(line => line.Split('|')[0]));
        }
    }

    private string Sqlite(string sql)
    {
        ProcessStartInfo start = new("/usr/bin/sqlite3", ["-readonly", "-bail", _folder.File, sql])
        {
            RedirectStandardOutput = true,
            RedirectStandardError = true,
        };
        using Process process = Process.Start(start)!;
        string answer = process.StandardOutput.ReadToEnd();
        Assert.Equal("", process.StandardError.ReadToEnd());
        process.WaitForExit();
        return answer;
    }
}
