namespace EndToEnd;

/// <summary>Bad devices through runs of real processes. Every named one, and many that pass, go the same road in simulated
/// time (tests/Soak.Tests).</summary>
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
}
