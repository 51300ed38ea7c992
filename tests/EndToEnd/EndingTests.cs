namespace EndToEnd;

/// <summary>Ways out of a run: the operator's interrupt, a killed process, a second run, a latch.</summary>
public sealed class EndingTests : IDisposable
{
    private const int Interrupt = 2;
    private const int Kill = 9;
    private readonly Workplace _place = new();
    private Started? _bench;

    public void Dispose()
    {
        _bench?.Dispose();
        _place.Dispose();
    }

    [Theory]
    [InlineData(1)]
    [InlineData(10)]
    public async Task An_interrupt_once_or_ten_times_leads_through_the_safe_state(int times)
    {
        using Started run = StartInterruptible("run", Workplace.Sequence, "--device", "W1200-0001");
        await run.Line(line => line.Contains("half capture 2", StringComparison.Ordinal));
        for (int i = 0; i < times; i++)
        {
            run.Signal(Interrupt);
        }

        Finished ended = (await run.End()).Expect(130);
        Assert.Contains("below 60 V DC", ended.Output, StringComparison.Ordinal);
        Assert.Equal("stopped", _place.Ask<string>("select outcome from device_outcomes"));
        Assert.Equal(1, _place.Ask<long>("select count(*) from events where kind = 'bus-down'"));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_killed_run_leaves_a_file_that_opens_says_so_and_holds_every_announced_capture()
    {
        int announced;
        using (Started run = _place.Start("run", Workplace.Sequence, "--device", "W1200-0001"))
        {
            await run.Line(line => line.Contains("half capture 4", StringComparison.Ordinal));
            run.Signal(Kill);
            announced = (await run.End()).Lines.Count(line => line.Contains(" capture ", StringComparison.Ordinal));
        }

        Assert.Equal("ok", _place.Ask<string>("pragma integrity_check"));
        Assert.InRange(_place.Ask<long>("select count(*) from captures"), announced, announced + 1);

        Finished next = (await _place.Run("run", Workplace.Sequence, "--device", "W1200-0002")).Expect(0);
        Assert.Contains("had no end and was closed as stopped", next.Output, StringComparison.Ordinal);
        Assert.Equal("stopped", _place.Ask<string>("select outcome from device_outcomes where device = 'W1200-0001'"));
    }

    [Fact]
    public async Task A_trip_above_60_volts_latches_a_bench_until_a_person_clears_it()
    {
        string[] run = await OtherBench("interlock-opens@fire:2");
        (await _place.Run(run)).Expect(4);

        Finished refused = (await _place.Run(run)).Expect(4);
        Assert.Contains("latch stands", refused.Error, StringComparison.Ordinal);
        Assert.Contains("interlock loop is open", refused.Error, StringComparison.Ordinal);
        Assert.Equal(1, _place.Ask<long>("select count(*) from events where kind = "
            + "'latched'", _place.Path("bench-evidence.db")));

        string bench = run[Array.IndexOf(run, "--bench") + 1];
        (await _place.Run("bench", "clear", "--bench", bench, "--by", "A. Person", "--because", "door closed")).Expect(
            0);
        Finished cleared = await _place.Run(
            "bench", "clear", "--bench", bench, "--by", "A. Person", "--because", "again");
        Assert.Contains("no latch stands", cleared.Expect(0).Output, StringComparison.Ordinal);
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_bus_that_is_not_proved_down_latches_the_bench()
    {
        string[] run = await OtherBench("bus-stays-up");
        (await _place.Run(run)).Expect(4);

        Finished refused = (await _place.Run(run)).Expect(4);

        Assert.Contains("the bus was not proved down", refused.Error, StringComparison.Ordinal);
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_second_run_on_one_bench_is_refused_and_told_who_holds_it()
    {
        string[] run = await OtherBench();
        using Started first = _place.Start(run);
        await first.Line(line => line.Contains("half capture 1", StringComparison.Ordinal));

        Finished second = (await _place.Run([.. run, "--evidence", "other.db"])).Expect(5);

        Assert.Contains("in use by process", second.Error, StringComparison.Ordinal);
        (await first.End()).Expect(0);
    }

    /// <summary>Starts instruments by hand, and gives the arguments of a run on them.</summary>
    private async Task<string[]> OtherBench(params string[] faults)
    {
        Directory.CreateDirectory(_place.Path("benches"));
        string file = Path.Combine(_place.Path("benches"), "lab.yaml");
        _bench = _place.Start(
            Workplace.FakeBench,
            ["serve", "--ends-with-input", "--device", "W1200-0001", "--pace", "5", "--write-bench", file,
                .. faults.SelectMany(f => (string[])["--fault", f])]);
        await _bench.Line(line => line == "ready");
        Workplace.MakePatient(file);
        return
        [
            "run", Workplace.Sequence, "--device", "W1200-0001", "--bench", file, "--operator", "op",
            "--armed-by", "op",
        ];
    }

    /// <summary>Starts the program as an operator would.</summary>
    /// <remarks>Whoever runs the tests may ignore SIGINT (a job in the background does) and pass that on.</remarks>
    private Started StartInterruptible(params string[] arguments) => OperatingSystem.IsLinux()
        ? _place.Start("env", ["--default-signal=INT", Workplace.Program, .. arguments])
        : _place.Start(arguments);
}
