namespace EndToEnd;

/// <summary>The guardian against processes that are killed and stopped for real; the bench itself says what became of
/// it.</summary>
/// <remarks>As an ordinary user: the interlock's serial line is exclusive to the runner then, and free only once the runner
/// was ended.</remarks>
public sealed class GuardianTests : IDisposable
{
    private const int Kill = 9;
    private const int Continue = 18;
    private const int Stop = 19;
    private readonly Workplace _place = new Workplace().AsOrdinaryUser();

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task A_killed_run_ends_with_the_bus_down_a_latch_and_the_guardians_words_in_the_next_evidence()
    {
        using WrittenBench bench = await WrittenBench.Start(_place);
        using (Started run = await Charged(bench))
        {
            run.Signal(Kill);
            await bench.Says("outputs-off");
            await bench.Says("bus-down");
            Finished killed = await run.End();
            Assert.Contains("THE GUARDIAN ACTS", killed.Error, StringComparison.Ordinal);
        }

        Assert.Contains("guardian-proved", await File.ReadAllTextAsync(bench.GuardianLog, Cancel), StringComparison.Ordinal);
        Finished refused = (await _place.Run(bench.Run)).Expect(4);
        Assert.Contains("the guardian ended the run", refused.Error, StringComparison.Ordinal);
        (await _place.Run("bench", "clear", "--bench", bench.File, "--by", "A. Person", "--because", "seen")).Expect(0);

        (await _place.Run(bench.Run)).Expect(0);

        string evidence = _place.Path("bench-evidence.db");
        Assert.Equal(1, _place.Ask<long>("select count(*) from events where kind = 'guardian-acts'", evidence));
        Assert.Equal(1, _place.Ask<long>("select count(*) from events where kind = 'guardian-proved'", evidence));
        Assert.False(File.Exists(bench.GuardianLog), "what was taken into evidence is moved aside");
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_stopped_run_is_ended_and_never_fires_again()
    {
        using WrittenBench bench = await WrittenBench.Start(_place);
        using Started run = await Charged(bench);

        run.Signal(Stop);
        await bench.Says("outputs-off");
        string fired = await bench.Ask("pulser", "PULSe:COUNt?");
        Finished ended = await run.End();
        Assert.Equal(128 + Kill, ended.ExitCode);
        Assert.False(run.TrySignal(Continue), "there is nobody left to go on");
        await bench.Says("bus-down");

        Assert.Contains("no heartbeat for", ended.Error, StringComparison.Ordinal);
        Assert.Equal(fired, await bench.Ask("pulser", "PULSe:COUNt?"));
        Assert.True(File.Exists(bench.Latch));
    }

    [Theory]
    [Trait("kind", "slow")]
    [InlineData(Kill)]
    [InlineData(Stop)]
    public async Task Without_its_guardian_a_run_trips(int signal)
    {
        using WrittenBench bench = await WrittenBench.Start(_place);
        using Started run = await Charged(bench);

        int guardian = run.Guardian();
        Started.Send(guardian, signal);
        await bench.Says("outputs-off");
        Finished ended = (await EndedWithout(run, guardian)).Expect(4);

        Assert.Contains("the guardian", ended.Output, StringComparison.Ordinal);
        Assert.Contains("bus measured at", ended.Output, StringComparison.Ordinal);

        // One that is only stopped is missed later, when the bus may be down by itself.
        Assert.True(signal == Stop || File.Exists(bench.Latch));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task With_run_and_guardian_dead_the_interlocks_watchdog_acts()
    {
        using WrittenBench bench = await WrittenBench.Start(_place, "--interlock", "tcp");
        using Started run = await Charged(bench);

        // Stopped first: the guardian's death must not make it act before it dies.
        int guardian = run.Guardian();
        run.Signal(Stop);
        Started.Send(guardian, Kill);
        run.Signal(Kill);
        await run.End();
        await bench.Says("outputs-off");
        await bench.Says("bus-down");

        // Flags: loop closed, emergency stop, bleeder, watchdog has acted.
        Assert.Equal("1,0,1,1", await bench.Ask("interlock", "SENSe:DATA?"));
        Assert.False(File.Exists(bench.GuardianLog), "the guardian was dead");
        Assert.Contains(
            "watchdog has acted", (await _place.Run(bench.Run)).Expect(4).Error, StringComparison.Ordinal);
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task By_hand_it_makes_a_bench_safe_that_a_dead_computer_left_and_tells_no_beat_from_one()
    {
        using WrittenBench bench = await WrittenBench.Start(_place, "--interlock", "tcp");
        foreach (string last in (string[])["", "polled 1 200 200 -\nnonsense\n", "polled 1 200 200 -\npolled 3 200 200 -\n"])
        {
            await bench.Ask("interlock", "OUTP?", "OUTP 0");
            Assert.Equal("1", await bench.Ask("supply", "OUTP?", "VOLT 200", "OUTP 1"));
            await bench.Says("bus-up");

            using Started guard = _place.Start("guard", "--bench", bench.File, "--log", "/dev/full");
            await guard.Type("begin\n");
            await guard.Line(line => line.StartsWith("ready ", StringComparison.Ordinal));
            await guard.Type(last);
            if (last.Length == 0)
            {
                guard.Input.Close();
            }

            // Its log is on a full disk: it says so, and does its work all the same.
            Finished ended = (await guard.End()).Expect(0);
            await bench.Says("bus-down");
            Assert.Contains("not in its log", ended.Error, StringComparison.Ordinal);
            Assert.Equal("0", await bench.Ask("supply", "OUTP?"));
        }
    }

    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    private async Task<Started> Charged(WrittenBench bench)
    {
        Started run = _place.Start(bench.Run);
        await run.Line(line => line.Contains("rated capture 1", StringComparison.Ordinal));
        return run;
    }

    /// <summary>A stopped guardian holds the run's standard error open: it is let go once the run has ended.</summary>
    private static async Task<Finished> EndedWithout(Started run, int guardian)
    {
        await run.Exited();
        Started.Send(guardian, Kill);
        return await run.End();
    }
}
