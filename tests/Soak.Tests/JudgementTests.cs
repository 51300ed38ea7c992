using System.Text.Json;
using BenchRunner.Acceptance.Events;
using BenchRunner.Soak.Mixes;
using Microsoft.Data.Sqlite;

namespace BenchRunner.Soak.Tests;

/// <summary>The judgement finds what is wrong: facts of a sound run, each spoilt in one way.</summary>
public sealed class JudgementTests : IDisposable
{
    private readonly Trials _trials = new();

    public void Dispose() => _trials.Dispose();

    [Fact]
    public void Nothing_is_wrong_with_a_sound_run() => Assert.Empty(Wrong(facts => facts));

    [Fact]
    public void A_bus_above_60_V_at_the_end_is_reported() =>
        Assert.Contains("the bus is at 61.0 V, exit code 0, nothing said", Wrong(f => f with { BankVoltage = 61 }),
            StringComparison.Ordinal);

    [Fact]
    public void A_bus_that_was_called_down_and_is_not_is_reported() =>
        Assert.Contains("called down and is at 61.0 V", Wrong(f => f with { BankVoltage = 61 }), StringComparison.Ordinal);

    [Fact]
    public void A_link_that_was_left_open_is_reported() =>
        Assert.Contains("a link to scope was left open", Wrong(f => f with { OpenLinks = ["scope"] }),
            StringComparison.Ordinal);

    [Fact]
    public void A_file_that_was_left_behind_is_reported() =>
        Assert.Contains("half.tmp was left behind", Wrong(f =>
        {
            File.WriteAllText(Path.Combine(f.Folder, "half.tmp"), "");
            return f;
        }), StringComparison.Ordinal);

    [Fact]
    public void A_train_without_a_capture_is_reported() =>
        Assert.Contains("trains were fired", Wrong(f => f with { Fires = f.Fires + 1 }), StringComparison.Ordinal);

    [Fact]
    public void A_capture_lost_from_the_evidence_is_reported()
    {
        string wrong = Wrong(f =>
        {
            string file = Path.Combine(f.Folder, "evidence.db");
            using var connection = new SqliteConnection($"Data Source={file};Pooling=False");
            connection.Open();
            using SqliteCommand command = connection.CreateCommand();
            command.CommandText =
                "select group_concat('drop trigger \"' || name || '\";', ' ') from sqlite_master where type = 'trigger'";
            string drop = (string)command.ExecuteScalar()!;
#pragma warning disable CA2100 // Names of triggers of the file that was just written.
            command.CommandText = drop;
#pragma warning restore CA2100
            command.ExecuteNonQuery();
            command.CommandText =
                "pragma foreign_keys = off; delete from capture where id = (select max(id) from capture)";
            Assert.Equal(1, command.ExecuteNonQuery());
            return f;
        });
        Assert.Contains("captures are stored", wrong, StringComparison.Ordinal);
        Assert.Contains("audit:", wrong, StringComparison.Ordinal);
    }

    [Fact]
    public void A_trip_without_exit_code_4_is_reported() =>
        Assert.Contains("exit code 0 though it tripped", Wrong(f =>
        {
            f.Recorder.Events.Add(f.Recorder.Events[^1] with { Kind = "trip", Severity = Severity.Alarm });
            return f;
        }), StringComparison.Ordinal);

    [Fact]
    public void A_live_run_that_the_guardian_ended_is_reported() =>
        Assert.Contains("alive", Wrong(f => f with { RunWasEnded = true }), StringComparison.Ordinal);

    [Theory]
    [InlineData(true)]
    [InlineData(false)]
    public void A_failure_is_the_exit_code_and_is_printed_with_its_seed(bool fails)
    {
        using var output = new StringWriter();
        Failure[] failures = fails ? [new(17, "the bus is at 61.0 V"), new(4, "hangs")] : [];

        int code = Program.Conclude(new Options(1, 20, Json: true, Log: false, []), failures, output);

        Assert.Equal(fails ? 1 : 0, code);
        JsonElement json = JsonDocument.Parse(output.ToString()).RootElement;
        Assert.Equal(["mixes", "failures"], json.EnumerateObject().Select(property => property.Name));
        Assert.Equal(20, json.GetProperty("mixes").GetInt32());
        Assert.Equal(
            failures.OrderBy(failure => failure.Seed).Select(failure => (failure.Seed, failure.What)),
            json.GetProperty("failures").EnumerateArray().Select(
                one => (one.GetProperty("seed").GetUInt64(), one.GetProperty("what").GetString()!)));
    }

    [Fact]
    public void A_descriptor_and_a_file_that_outlive_all_mixes_are_reported()
    {
        string folder = Directory.CreateTempSubdirectory("leaks-").FullName;
        string elsewhere = Path.GetTempFileName();
        try
        {
            var leaks = new Leaks(folder);
            File.WriteAllText(Path.Combine(folder, "left"), "");
            using FileStream held = File.OpenRead(elsewhere);
            string[] found = [.. leaks.Found()];
            Assert.Contains(found, line => line.EndsWith("left", StringComparison.Ordinal));
            if (OperatingSystem.IsLinux())
            {
                Assert.Contains($"left behind: {elsewhere}", found);
            }
        }
        finally
        {
            Directory.Delete(folder, recursive: true);
            File.Delete(elsewhere);
        }
    }

    private string Wrong(Func<Facts, Facts> spoil) =>
        _trials.Under([], facts => Judgement.Of(spoil(facts))).Wrong;
}
