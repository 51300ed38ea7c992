using Microsoft.Data.Sqlite;

namespace EndToEnd;

/// <summary>What run and guardian do where the machine fails them: no thread gets on, nobody reads, disks are full or
/// hang, nothing more can be opened. The bench itself says what became of it.</summary>
/// <remarks>None of this has a hook in the program: limits, pipes, locks and signals come from outside.</remarks>
[Trait("kind", "slow")]
public sealed class GuardianHardshipTests : IDisposable
{
    private const int Kill = 9;

    /// <summary>A runtime that may have a single thread in its pool: the watch shares it with whatever blocks.</summary>
    private static readonly string[] _oneThread =
        ["env", "DOTNET_ThreadPool_ForceMinWorkerThreads=1", "DOTNET_ThreadPool_ForceMaxWorkerThreads=1"];

    private readonly Workplace _place = new Workplace().AsOrdinaryUser();

    public void Dispose() => _place.Dispose();

    /// <summary>It lives, holds every link, and none of its work gets on: a commit waits for a lock that another program
    /// has on the evidence, on the only thread that there is.</summary>
    [Fact]
    public async Task A_deadlocked_run_is_ended_and_the_bus_goes_down()
    {
        using WrittenBench bench = await WrittenBench.Start(_place);
        using Started run = await Charged(bench, _oneThread);
        using SqliteConnection other = Hold(_place.Path("bench-evidence.db"));

        await bench.Says("outputs-off");
        await bench.Says("bus-down");
        Finished ended = await run.End();

        Assert.Equal(128 + Kill, ended.ExitCode);
        Assert.Contains("no heartbeat for", ended.Error, StringComparison.Ordinal);
        Assert.True(File.Exists(bench.Latch));
    }

    [Fact]
    public async Task Held_evidence_ends_a_run_whose_watch_goes_on()
    {
        using WrittenBench bench = await WrittenBench.Start(_place);
        using Started run = await Charged(bench);
        using SqliteConnection other = Hold(_place.Path("bench-evidence.db"));

        await bench.Says("outputs-off");
        await bench.Says("bus-down");
        Finished ended = (await run.End()).Expect(6);

        Assert.DoesNotContain("THE GUARDIAN ACTS", ended.Error, StringComparison.Ordinal);
    }

    /// <summary>A console that was stopped, a pipe that is full: a run does not wait for it.</summary>
    [Fact]
    public async Task A_run_goes_on_where_nobody_reads_what_it_says()
    {
        using WrittenBench bench = await WrittenBench.Start(_place);
        using var unread = new FullPipe(_place.Path("unread"));
        using Started run = _place.Start(
            "sh", ["-c", "exec \"$@\" > unread", "sh", Workplace.Program, .. bench.Run]);

        await Sealed();
        Assert.Equal("accepted", _place.Ask<string>("select outcome from device_outcomes", Evidence));
        Assert.Equal(
            1, _place.Ask<long>("select count(*) from events where kind = 'bus-down' and message like '% 4_._ V %'", Evidence));
        Assert.False(run.HasEnded, "what it has to say is still to be written");
        unread.Drain();
        (await run.End()).Expect(0);
        Assert.False(File.Exists(bench.GuardianLog));
    }

    [Fact]
    public async Task A_run_goes_on_where_its_output_was_closed()
    {
        using WrittenBench bench = await WrittenBench.Start(_place);
        using Started run = _place.Start(
            "sh", ["-c", "trap '' PIPE; \"$@\" | head -n 1; true", "sh", Workplace.Program, .. bench.Run]);

        await Sealed();
        (await run.End()).Expect(0);

        Assert.Equal("accepted", _place.Ask<string>("select outcome from device_outcomes", Evidence));
    }

    /// <summary>As a full disk, for who may mount none: what is written beyond a size fails.</summary>
    [Fact]
    public async Task Evidence_that_takes_no_more_ends_a_run_in_the_safe_state()
    {
        using WrittenBench bench = await WrittenBench.Start(_place);

        // The runtime's own memory is a file too, unless it is told to keep code and data together.
        using Started run = _place.Start(
            "env", ["DOTNET_EnableWriteXorExecute=0", "prlimit", "--fsize=850000", "--", Workplace.Program, .. bench.Run]);
        await run.Line(line => line.Contains("half: 400 V", StringComparison.Ordinal));

        await bench.Says("outputs-off");
        await bench.Says("bus-down");
        Finished ended = (await run.End()).Expect(6);

        Assert.Contains("bus measured at", ended.Output, StringComparison.Ordinal);
        Assert.DoesNotContain("THE GUARDIAN ACTS", ended.Error, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_full_disk_ends_a_run_in_the_safe_state()
    {
        using SmallDisk disk = SmallDisk.MountOrSkip(_place.Path("disk"));
        using WrittenBench bench = await WrittenBench.Start(_place);
        using Started run = await Charged(bench, [], "--evidence", Path.Combine(disk.Folder, "evidence.db"));
        disk.Fill();

        await bench.Says("outputs-off");
        await bench.Says("bus-down");
        Finished ended = (await run.End()).Expect(6);

        Assert.Contains("full", ended.Output + ended.Error, StringComparison.Ordinal);
        Assert.Contains("bus measured at", ended.Output, StringComparison.Ordinal);
    }

    /// <summary>A mark on a disk that hangs is waited for after all else, and not for long.</summary>
    [Fact]
    public async Task A_disk_that_hangs_does_not_hold_up_the_guardian()
    {
        using WrittenBench bench = await WrittenBench.Start(_place);
        using Started run = await Charged(bench);
        FullPipe.Make(bench.Latch);
        FullPipe.Make(bench.GuardianLog);

        run.Signal(Kill);
        await bench.Says("outputs-off");
        await bench.Says("bus-down");
        await run.End();

        Assert.Equal("0", await bench.Ask("supply", "OUTP?"));
    }

    [Theory]
    [InlineData(8)]
    [InlineData(24)]
    [InlineData(64)]
    [InlineData(128)]
    [InlineData(255)]
    public async Task A_run_that_may_open_too_few_files_touches_nothing(int files)
    {
        using WrittenBench bench = await WrittenBench.Start(_place);
        using Started run = _place.Start("prlimit", [$"--nofile={files}", "--", Workplace.Program, .. bench.Run]);

        Finished refused = await run.End();

        Assert.NotEqual(0, refused.ExitCode);
        Assert.Equal("0", await bench.Ask("supply", "OUTP?"));
        Assert.False(File.Exists(Evidence));
        if (files > 24)
        {
            // With fewer the runtime itself does not start, and says so in its own words.
            Assert.Contains($"may have {files} files open", refused.Expect(5).Error, StringComparison.Ordinal);
        }
    }

    [Fact]
    public async Task A_run_out_of_descriptors_with_the_bus_up_ends_with_the_bus_down()
    {
        using WrittenBench bench = await WrittenBench.Start(_place);
        using Started run = await Charged(bench);

        await Limit(run.Id);
        await bench.Says("outputs-off");
        await bench.Says("bus-down");
        await run.End();

        Assert.Equal("0", await bench.Ask("supply", "OUTP?"));
    }

    /// <summary>The serial line that the runner held cannot be opened then: the interlock's own watchdog discharges, and
    /// the guardian waits for the proof.</summary>
    [Fact]
    public async Task A_guardian_out_of_descriptors_switches_off_what_it_has_and_proves_the_bus()
    {
        using WrittenBench bench = await WrittenBench.Start(_place);
        using Started run = await Charged(bench);

        await Limit(run.Guardian());
        run.Signal(Kill);
        await bench.Says("outputs-off");
        await bench.Says("bus-down");
        Finished ended = await run.End();

        Assert.True(ended.Error.Contains("THE GUARDIAN ACTS", StringComparison.Ordinal), ended.All);
        Assert.Equal("0", await bench.Ask("supply", "OUTP?"));
    }

    private static CancellationToken Cancel => TestContext.Current.CancellationToken;

    private string Evidence => _place.Path("bench-evidence.db");

    private async Task<Started> Charged(WrittenBench bench, string[]? before = null, params string[] more)
    {
        string[] command = [.. before ?? [], Workplace.Program, .. bench.Run, .. more];
        Started run = _place.Start(command[0], command[1..]);
        await run.Line(line => line.Contains("rated capture 1", StringComparison.Ordinal));
        return run;
    }

    private static SqliteConnection Hold(string evidence)
    {
        var other = new SqliteConnection($"Data Source={evidence};Pooling=False");
        other.Open();
        using SqliteCommand begin = other.CreateCommand();
        begin.CommandText = "begin immediate";
        begin.ExecuteNonQuery();
        return other;
    }

    /// <summary>No descriptor beyond those that a process has open.</summary>
    private async Task Limit(int process)
    {
        using Started limited = _place.Start("prlimit", ["--pid", $"{process}", "--nofile=3:3"]);
        (await limited.End()).Expect(0);
    }

    /// <summary>Waits until the run has its end in the evidence.</summary>
    private async Task Sealed()
    {
        using var patience = new CancellationTokenSource(TimeSpan.FromSeconds(120));
        while (!File.Exists(Evidence)
            || _place.Ask<long>("select count(*) from sqlite_master where name = 'device_outcomes'", Evidence) == 0
            || _place.Ask<long>("select count(*) from device_outcomes", Evidence) == 0)
        {
            await Task.Delay(TimeSpan.FromMilliseconds(100), TimeProvider.System, patience.Token);
        }
    }
}
