using BenchRunner.Acceptance.Decisions;
using BenchRunner.Evidence;
using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Roles;
using BenchRunner.Runner.Benches;
using BenchRunner.Runner.Devices;
using BenchRunner.Runner.Sessions;
using BenchRunner.Safety;
using BenchRunner.Soak.Simulated;
using Microsoft.Data.Sqlite;

namespace BenchRunner.Soak.Mixes;

/// <summary>What a trial left behind.</summary>
/// <param name="Mix">The mix.</param>
/// <param name="Bench">The bench.</param>
/// <param name="Recorder">What was said.</param>
/// <param name="Summary">The session's end; null: it threw.</param>
/// <param name="Thrown">What it threw; null: it did not.</param>
/// <param name="Interrupted">Whether the operator interrupted.</param>
/// <param name="Folder">The folder with the evidence.</param>
internal sealed record Facts(
    Mix Mix, MemoryBench Bench, Recorder Recorder, RunSummary? Summary, Exception? Thrown, bool Interrupted, string Folder)
{
    /// <summary>What the bank has at the end, V.</summary>
    public double BankVoltage { get; init; } = Bench.BankVoltage;

    /// <summary>Trains that were fired.</summary>
    public long Fires { get; init; } = Bench.Fires;

    /// <summary>Roles whose links nobody has closed.</summary>
    public IReadOnlyList<string> OpenLinks { get; init; } = [.. Bench.Open];

    /// <summary>Whether the guardian ended the run.</summary>
    public bool RunWasEnded { get; init; }

    /// <summary>Where the evidence is.</summary>
    public string EvidenceFile { get; } = Path.Combine(Folder, "evidence.db");

    /// <summary>The one device's report; null: it got no run.</summary>
    public DeviceReport? Report => Recorder.Reports.SingleOrDefault();

    /// <summary>What plain SQL asks of the evidence file.</summary>
    public List<object[]> Rows(string sql)
    {
        using var connection = new SqliteConnection($"Data Source={EvidenceFile};Mode=ReadOnly;Pooling=False");
        connection.Open();
        using SqliteCommand command = connection.CreateCommand();
#pragma warning disable CA2100 // The soak's own SQL.
        command.CommandText = sql;
#pragma warning restore CA2100
        using SqliteDataReader reader = command.ExecuteReader();
        var rows = new List<object[]>();
        while (reader.Read())
        {
            var row = new object[reader.FieldCount];
            reader.GetValues(row);
            rows.Add(row);
        }

        return rows;
    }

    /// <summary>One value of it.</summary>
    public T Ask<T>(string sql) => (T)Rows(sql).Single().Single();

    /// <summary>The exit code that the README documents for it, read there anew rather than taken from the
    /// command.</summary>
    public int ExitCode => Thrown is { } thrown ? Of(thrown)
        : Summary!.BrokenOff is { } broken ? Worse(Of(broken), OfReport)
        : OfReport;

    private int OfReport => Report!.Ending switch
    {
        BenchEnding.Tripped => 4,
        BenchEnding.InstrumentFailed => 5,
        BenchEnding.EvidenceFailed => 6,
        BenchEnding.Interrupted => 130,
        BenchEnding.Fault => 70,
        _ => Report.Decision.Outcome switch
        {
            Outcome.Accepted or Outcome.Stopped => 0,
            Outcome.Rejected => 1,
            _ => 3,
        },
    };

    private static int Worse(int one, int other)
    {
        int[] rank = [4, 6, 5, 70, 130, 2, 1, 3, 0];
        return Array.IndexOf(rank, one) < Array.IndexOf(rank, other) ? one : other;
    }

    private int Of(Exception thrown) => thrown switch
    {
        OperationCanceledException when Interrupted => 130,
        RefusedException { Kind: RefusalKind.Latched } => 4,
        RefusedException { Kind: RefusalKind.Taken } => 5,
        RefusedException => 2,
        EvidenceException => 6,
        SafetyException => 4,
        BenchException or LinkException or InstrumentException => 5,
        _ => 70,
    };
}
