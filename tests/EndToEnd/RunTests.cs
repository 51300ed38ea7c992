using System.Text.Json;

namespace EndToEnd;

/// <summary>Whole runs over real sockets, a real pty and a real SQLite file.</summary>
public sealed class RunTests : IDisposable
{
    private readonly Workplace _place = new();

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task The_main_job_accepts_a_sound_device_and_says_simulated_first_and_last()
    {
        Finished run = (await _place.Run("run", Workplace.Sequence, "--device", "W1200-0001")).Expect(0);

        Assert.StartsWith("SIMULATED", run.Lines[0], StringComparison.Ordinal);
        Assert.StartsWith("SIMULATED", run.Lines[^1], StringComparison.Ordinal);
        Assert.Contains(run.Lines, line => line.Contains("ACCEPTED", StringComparison.Ordinal));
        Assert.Equal("accepted", _place.Ask<string>("select outcome from device_outcomes"));
        Assert.Equal(10, _place.Ask<long>("select captures_valid from device_outcomes"));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_pipe_gets_no_control_codes()
    {
        Finished run = (await _place.Run("run", Workplace.Sequence, "--device", "W1200-0001")).Expect(0);

        Assert.DoesNotContain('\u001b', run.Output);
        Assert.DoesNotContain('\r', run.Output);
    }

    [Fact]
    public async Task The_cautions_stand_before_anything_is_charged()
    {
        Finished run = (await _place.Run("run", Workplace.Sequence, "--device", "W1200-0001")).Expect(0);

        int caution = run.Output.IndexOf("it can kill", StringComparison.Ordinal);
        int charging = run.Output.IndexOf("charging the bus", StringComparison.Ordinal);
        Assert.InRange(caution, 0, charging);
        Assert.Contains("not a safety device", run.Output, StringComparison.Ordinal);
    }

    [Fact]
    public async Task The_bus_is_proved_down_before_the_second_proving_and_before_the_decision_is_sealed()
    {
        (await _place.Run("run", Workplace.Sequence, "--device", "W1200-0001")).Expect(0);

        Assert.Equal(2, _place.Ask<long>("select count(*) from events where kind = 'bus-down'"));
        Assert.Equal(0, _place.Ask<long>("select count(*) from events where severity in ('error', 'alarm')"));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task Every_limit_of_the_sequence_has_exactly_one_decided_measurement()
    {
        (await _place.Run("run", Workplace.Sequence, "--device", "W1200-0001")).Expect(0);

        int limits = File.ReadLines(Workplace.Sequence)
            .Count(line => line.Contains("{ quantity:", StringComparison.Ordinal));
        Assert.Equal(limits, _place.Ask<long>("select count(*) from measurements where conformity = 'conforms'"));
        Assert.Equal(limits, _place.Ask<long>("select count(*) from measurements where conformity is not null"));
    }

    [Fact]
    public async Task Json_is_one_document_and_the_log_goes_to_standard_error()
    {
        Finished run = (await _place.Run("run", Workplace.Sequence, "--device", "W1200-0001", "--json")).Expect(0);

        using JsonDocument document = JsonDocument.Parse(run.Output);
        JsonElement device = document.RootElement.GetProperty("devices")[0];
        Assert.Equal(1, document.RootElement.GetProperty("format").GetInt32());
        Assert.True(document.RootElement.GetProperty("simulated").GetBoolean());
        Assert.Equal(0, document.RootElement.GetProperty("exit_code").GetInt32());
        Assert.Equal("accepted", device.GetProperty("outcome").GetString());
        Assert.Contains("ACCEPTED", run.Error, StringComparison.Ordinal);

        // 50 uF: 60 V is the stricter of 60 V and 350 mJ, and what is left is C V^2 / 2.
        Assert.Equal(60, document.RootElement.GetProperty("safety").GetProperty("down_below").GetDouble());
        JsonElement bus = device.GetProperty("bus");
        double volts = bus.GetProperty("voltage").GetDouble();
        Assert.True(bus.GetProperty("proved_down").GetBoolean());
        Assert.InRange(volts, 0, 60);
        Assert.Equal(50e-6 * volts * volts / 2, bus.GetProperty("energy_at_most").GetDouble(), 1e-9);
        string[] columns =
            [.. device.GetProperty("measurements")[0].EnumerateObject().Select(property => property.Name)];
        Assert.Equal(
            _place.Rows("select name from pragma_table_info('measurements')").Select(row => (string)row[0]), columns);
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task One_seed_gives_the_same_traces_and_the_same_decisions()
    {
        (await _place.Run("run", Workplace.Sequence, "--device", "W1200-0002", "--evidence", "one.db")).Expect(0);
        (await _place.Run("run", Workplace.Sequence, "--device", "W1200-0002", "--evidence", "two.db")).Expect(0);

        const string traces =
            "select group_concat(sha256, ' ') from (select sha256 from trace order by capture, channel)";
        const string values =
            "select operating_point, quantity, definition, value, expanded_uncertainty, conformity from measurements "
            + "order by 1, 2, 3";
        Assert.Equal(
            _place.Ask<string>(traces, _place.Path("one.db")), _place.Ask<string>(traces, _place.Path("two.db")));
        Assert.Equal(_place.Rows(values, _place.Path("one.db")), _place.Rows(values, _place.Path("two.db")));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task Another_seed_gives_other_traces()
    {
        string bench = _place.FakeBenchFile("{ seed: 2, pace: 5 }");
        (await _place.Run("run", Workplace.Sequence, "--device", "W1200-0002", "--evidence", "one.db")).Expect(0);
        (await _place.Run("run", Workplace.Sequence, "--device", "W1200-0002", "--evidence", "two.db",
            "--bench", bench)).Expect(0);

        const string traces =
            "select group_concat(sha256, ' ') from (select sha256 from trace order by capture, channel)";
        Assert.NotEqual(
            _place.Ask<string>(traces, _place.Path("one.db")), _place.Ask<string>(traces, _place.Path("two.db")));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task Several_devices_are_exchanged_through_an_enclosure_seen_open_and_closed()
    {
        Finished run = (await _place.Run(
            "run", Workplace.Sequence, "--device", "W1200-0001", "--device", "W1200-0002", "--lot", "L-7")).Expect(0);

        Assert.Contains("enclosure seen open and closed again; W1200-0002", run.Output, StringComparison.Ordinal);
        Assert.Equal(2, _place.Ask<long>("select accepted from lot_yield where lot = 'L-7'"));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task An_exchange_that_fails_leaves_the_first_device_in_the_report_and_names_the_second()
    {
        string bench = _place.FakeBenchFile("{ seed: 1, pace: 5, faults: [not-exchanged] }");
        Finished run = (await _place.Run(
            "run", Workplace.Sequence, "--bench", bench, "--device", "W1200-0001", "--device", "W1200-0002",
            "--json")).Expect(5);

        using JsonDocument document = JsonDocument.Parse(run.Output);
        JsonElement device = Assert.Single(document.RootElement.GetProperty("devices").EnumerateArray().ToArray());
        Assert.Equal("W1200-0001", device.GetProperty("device").GetString());
        Assert.Equal("W1200-0002", document.RootElement.GetProperty("not_run")[0].GetString());
        Assert.Contains("not seen open", run.Error, StringComparison.Ordinal);
        Assert.DoesNotContain('\a', run.Error);
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task Another_part_put_into_the_socket_is_rejected()
    {
        string bench = _place.FakeBenchFile("{ seed: 1, pace: 5, faults: [wrong-part] }");
        (await _place.Run(
            "run", Workplace.Sequence, "--bench", bench, "--device", "W1200-0001", "--device",
            "W1200-0002")).Expect(1);

        Assert.Equal("rejected", _place.Ask<string>("select outcome from device_outcomes where device = 'W1200-0002'"));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task Serials_come_from_standard_input_and_a_wrong_one_is_said_and_skipped()
    {
        using Started run = _place.Start("run", Workplace.Sequence, "--device", "-");
        await run.Input.WriteLineAsync("W1200-0003");
        await run.Input.WriteLineAsync("B-17; drop table");
        run.Input.Close();
        Finished ended = (await run.End()).Expect(0);

        Assert.Contains("standard input:2", ended.Output, StringComparison.Ordinal);
        Assert.Equal("W1200-0003", _place.Ask<string>("select device from device_outcomes"));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_device_with_a_slow_diode_is_rejected_for_its_recovery()
    {
        // W1200-9001 is listed by `FakeBench devices` with too much recovered charge.
        (await _place.Run("run", Workplace.Sequence, "--device", "W1200-9001")).Expect(1);

        Assert.Equal("rejected", _place.Ask<string>("select outcome from device_outcomes"));
        Assert.Equal("fails", _place.Ask<string>(
            "select conformity from measurements where quantity = 'qrr' and operating_point = 'rated' and conformity "
                + "is not null"));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_device_decided_in_its_lot_is_refused_without_a_reason()
    {
        string[] run = ["run", Workplace.Sequence, "--device", "W1200-0001", "--lot", "L-7"];
        (await _place.Run(run)).Expect(0);
        Finished refused = (await _place.Run(run)).Expect(2);
        Assert.Contains("--again", refused.Error, StringComparison.Ordinal);

        (await _place.Run([.. run, "--again", "contact cleaned"])).Expect(0);
        Assert.Equal(2, _place.Ask<long>("select max(attempt) from device_outcomes"));
        Assert.Equal(1, _place.Ask<long>("select count(*) from device_outcomes where current"));
    }

    [Fact]
    public async Task An_audit_finds_a_run_as_sealed_and_a_changed_value_not()
    {
        (await _place.Run("run", Workplace.Sequence, "--device", "W1200-0001")).Expect(0);
        Assert.Contains("as sealed", (await _place.Run("audit")).Expect(0).Output, StringComparison.Ordinal);

        string file = $"Data Source={_place.Evidence};Pooling=False";
        using (var connection = new Microsoft.Data.Sqlite.SqliteConnection(file))
        {
            connection.Open();
            using Microsoft.Data.Sqlite.SqliteCommand command = connection.CreateCommand();
            command.CommandText =
                "drop trigger measurement_is_never_changed; update measurement set value = 1.01 * value where "
                    + "conformity = 'conforms'";
            command.ExecuteNonQuery();
        }

        using JsonDocument audit = JsonDocument.Parse((await _place.Run("audit", "--json")).Expect(6).Output);
        Assert.False(audit.RootElement.GetProperty("ok").GetBoolean());
        Assert.NotEmpty(audit.RootElement.GetProperty("problems").EnumerateArray());
    }
}
