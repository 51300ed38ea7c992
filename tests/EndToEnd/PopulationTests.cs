using BenchRunner.Evidence.Audits;

namespace EndToEnd;

/// <summary>Every way a part or a bench can be bad, each through a whole run to the outcome that <c>FakeBench
/// devices</c> lists; and sound devices, which pass.</summary>
public sealed class PopulationTests : IDisposable
{
    private readonly Workplace _place = new Workplace().WithPatience(TimeSpan.FromMinutes(8));

    public void Dispose() => _place.Dispose();

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_device_found_faulty_below_60_V_is_taken_out_and_the_day_goes_on()
    {
        // By `FakeBench devices`: shorted, open below, open above; then a sound one.
        Finished run = await _place.Run(
            "run", Workplace.Sequence, "--device", "W1200-9009", "--device", "W1200-9011", "--device", "W1200-9012",
            "--device", "W1200-0001");

        run.Expect(1);
        Assert.Equal(
            "rejected,rejected,rejected,accepted",
            _place.Ask<string>("select group_concat(outcome) from (select outcome from device_outcomes order by run)"));
        Assert.Equal(0, _place.Ask<long>("select count(*) from events where kind = 'trip'"));
        Assert.Equal(2, _place.Ask<long>("select count(*) from events where kind = 'point-started'"));
        Assert.Equal(4, _place.Ask<long>("select count(*) from captures where operating_point = 'zero'"));

        // Two voltages, two holds, and the text says which place they speak of.
        Assert.Equal(2, _place.Ask<long>("select count(*) from leakage_holds where conforms"));
        Assert.Contains("the other place is not tested", run.Output, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_leaking_device_is_rejected_in_the_hold_before_any_train_at_its_voltage()
    {
        (await _place.Run("run", Workplace.Sequence, "--device", "W1200-9005")).Expect(1);

        Assert.Contains(
            "the low place leaks", _place.Ask<string>("select reason from device_outcomes"), StringComparison.Ordinal);
        Assert.Equal(
            "zero,proving-before", _place.Ask<string>("select group_concat(distinct operating_point) from captures"));
        Assert.Equal(0, _place.Ask<long>("select count(*) from events where kind = 'trip'"));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_device_that_dies_at_its_last_turn_off_is_rejected_and_its_values_say_so()
    {
        // It empties the bank at once, which proves nothing: an opened fuse looks the same.
        (await _place.Run("run", Workplace.Sequence, "--device", "W1200-9019")).Expect(4);

        Assert.StartsWith(
            "did not survive", _place.Ask<string>("select reason from device_outcomes"), StringComparison.Ordinal);
        Assert.Equal(10, _place.Ask<long>("select captures_valid from device_outcomes"));
        Assert.Equal(0, _place.Ask<long>(
            "select count(*) from measurements where coalesce(reason, '') not like '%did not survive%'"));
        Assert.True(_place.Ask<long>("select count(*) from measurements where conformity = 'conforms'") > 0);
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task Every_named_device_gets_the_outcome_that_is_listed()
    {
        (string Serial, string Outcome)[] listed = await Listed();
        Assert.True(listed.Length >= 16, $"{listed.Length} named devices");
        var differing = new List<string>();
        await Parallel.ForEachAsync(listed, new ParallelOptions { MaxDegreeOfParallelism = 2 }, async (device, cancel) =>
        {
            using var place = new Workplace();
            Finished run = await place.Run("run", Workplace.Sequence, "--device", device.Serial);
            string outcome = place.Ask<string>("select outcome from device_outcomes");
            bool trip = place.Ask<long>("select count(*) from events where kind = 'trip'") > 0;
            int expected = trip ? 4 : device.Outcome switch { "accepted" => 0, "rejected" => 1, _ => 3 };
            if (outcome != device.Outcome || run.ExitCode != expected
                || EvidenceAudit.Verify(place.Evidence, cancel: cancel).Problems.Count > 0)
            {
                lock (differing)
                {
                    differing.Add($"{device}: {outcome}, exit {run.ExitCode}\n{run.All}");
                }
            }
        });

        Assert.Empty(differing);
    }

    [Theory]
    [InlineData("W1200-9005")]
    [InlineData("W1200-9015")]
    [InlineData("W1200-9019")]
    [Trait("kind", "slow")]
    public async Task Without_its_defect_the_same_serial_is_accepted(string serial)
    {
        string bench = _place.Path("benches/sound.yaml");
        Directory.CreateDirectory(_place.Path("benches"));
        using Started fake = _place.Start(
            Workplace.FakeBench,
            ["serve", "--ends-with-input", "--interlock", "tcp", "--device", serial, "--pace", "5", "--sound",
                "--write-bench", bench]);
        await fake.Line(line => line == "ready");
        Workplace.MakePatient(bench);

        (await _place.Run(
            "run", Workplace.Sequence, "--device", serial, "--bench", bench, "--operator", "A. Person", "--armed-by",
            "A. Person", "--evidence", _place.Evidence)).Expect(0);

        Assert.Equal("accepted", _place.Ask<string>("select outcome from device_outcomes"));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task At_least_36_of_40_devices_drawn_at_random_are_accepted()
    {
        int seed = Environment.TickCount;
        TestContext.Current.SendDiagnosticMessage($"seed {seed}");
        var random = new Random(seed);
        string[][] halves =
        [
            .. Enumerable.Range(0, 8000).OrderBy(_ => random.Next()).Take(40)
                .Select(number => $"W1200-{number:0000}").Chunk(20),
        ];

        Finished[] runs = await Task.WhenAll(halves.Select((half, i) => _place.Run(
            ["run", Workplace.Sequence, "--evidence", $"{i}.db", .. half.SelectMany(serial => (string[])["--device", serial])])));

        long Count(string outcomes) => halves.Select((_, i) => _place.Ask<long>(
            $"select count(*) from device_outcomes where outcome in ({outcomes})", _place.Path($"{i}.db"))).Sum();
        Assert.Equal(40, Count("'accepted', 'undecided', 'rejected'"));
        Assert.True(Count("'accepted'") >= 36, $"seed {seed}\n{string.Join('\n', runs.Select(run => run.All))}");
    }

    private async Task<(string Serial, string Outcome)[]> Listed()
    {
        using Started devices = _place.Start(Workplace.FakeBench, ["devices"]);
        Finished listed = await devices.End();
        string[][] rows = [.. listed.Output.Split('\n', StringSplitOptions.RemoveEmptyEntries).Select(row => row.Split(','))];
        Assert.Equal(["serial", "part", "defect", "expected_outcome"], rows[0][..4]);
        return [.. rows.Skip(1).Select(row => (row[0], row[3]))];
    }
}
