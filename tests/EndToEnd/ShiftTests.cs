namespace EndToEnd;

/// <summary>Devices exchanged by hand: a person and a bar-code reader at one terminal, other hands at the
/// fixture.</summary>
public sealed class ShiftTests : IDisposable
{
    private const char Enter = '\n';
    private const char EndOfFile = '\u0004';
    private const char Interrupt = '\u0003';
    private const string WantsSerial = "Scan or type the serial";
    private readonly Workplace _place = new Workplace().WithPatience(TimeSpan.FromMinutes(4));
    private LabBench? _lab;

    private string Evidence => _place.Path("bench-evidence.db");

    public void Dispose()
    {
        _lab?.Dispose();
        _place.Dispose();
    }

    [Fact]
    public async Task Two_devices_are_confirmed_one_by_one_and_exchanged_between()
    {
        using Started run = await OnATerminal("--device W1200-0001 --device W1200-0002");
        await run.Next("W1200-0001: Type the highest bus voltage");
        await run.Type("400" + Enter);
        await Exchange(run, "W1200-0001", "W1200-0002");
        await run.Next("W1200-0002: Type the highest bus voltage");
        await run.Type("400" + Enter);
        (await run.End()).Expect(0);

        Assert.Equal(
            "W1200-0001 W1200-0002",
            _place.Ask<string>("select group_concat(device, ' ') from device_outcomes where not simulated", Evidence));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task Twelve_devices_are_scanned_confirmed_and_put_away_at_one_terminal()
    {
        // 9001, 9010 and 9012 are listed by `FakeBench devices`: slow diode, high place shorted, high place open.
        string[] devices =
        [
            "W1200-0001", "W1200-9001", "W1200-0002", "W1200-0003", "W1200-9010", "W1200-0004", "W1200-0005",
            "W1200-9012", "W1200-0006", "W1200-0007", "W1200-0008", "W1200-0009",
        ];
        using Started run = await OnATerminal("--device - --lot L-12");
        for (int i = 0; i < devices.Length; i++)
        {
            string device = devices[i];
            await run.Next(WantsSerial);
            await run.Type(device + Enter);
            if (i > 0)
            {
                await Exchange(run, devices[i - 1], device);
            }

            await run.Next($"{device}: Type the highest bus voltage");
            if (i is 3 or 7)
            {
                await run.Type("W1200-0042" + Enter);
                await run.Next("'W1200-0042' has the form of a serial and is no answer");
                await run.Next($"{device}: Type the highest bus voltage");
            }

            await run.Type("400" + Enter);
            await run.Next($"{device}: run ");
            if (i is 0 or 5)
            {
                await run.Type("W1200-0077" + Enter);
                await run.Next("'W1200-0077' came while nothing was asked for");
            }

            await run.Next($">>>  {device}");
            if (device.StartsWith("W1200-9", StringComparison.Ordinal))
            {
                await run.Next($"{device} is rejected: type where it was put");
                await run.Type($"red bin {i}{Enter}");
                await run.Next($"{device} was put: red bin {i}");
            }
        }

        await run.Next(WantsSerial);
        await run.Type($"{EndOfFile}");
        Finished ended = (await run.End()).Expect(1);

        Assert.Contains('\a', ended.Output);
        Assert.Equal(devices, _place.Rows("select device from device_outcomes order by run", Evidence)
            .Select(row => (string)row[0]));
        Assert.Equal(
            [["W1200-9001", "red bin 1", "op"], ["W1200-9010", "red bin 4", "op"], ["W1200-9012", "red bin 7", "op"]],
            _place.Rows("select device, place, author from placements order by at", Evidence));
        Assert.Equal(9, _place.Ask<long>("select accepted from lot_yield where lot = 'L-12'", Evidence));
        Assert.Equal(3, _place.Ask<long>("select rejected from lot_yield where lot = 'L-12'", Evidence));
        Assert.Equal(0, _place.Ask<long>("select count(*) from events where kind = 'trip'", Evidence));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_confirmation_is_void_when_the_enclosure_is_opened_and_comes_again_after_it_is_closed()
    {
        using Started run = await OnATerminal("--device W1200-0001");
        await run.Next("Type the highest bus voltage");
        await _lab!.Hands("open");
        await run.Next("the enclosure was opened: nothing is confirmed");
        await run.Type("400" + Enter);
        await run.Next("'400' came while nothing was asked for");
        await _lab.Hands("close");
        await run.Next("Type the highest bus voltage");
        Assert.Equal(0, _place.Ask<long>("select count(*) from captures", Evidence));
        await run.Type("400" + Enter);
        (await run.End()).Expect(0);
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task Who_closes_without_opening_waits_and_who_interrupts_leaves_the_next_device_without_a_run()
    {
        using Started run = await OnATerminal("--device W1200-0001 --device W1200-0002");
        await run.Next("Type the highest bus voltage");
        await run.Type("400" + Enter);
        await run.Next("open the enclosure, take W1200-0001 out, put W1200-0002 in");
        await _lab!.Hands("close");
        await run.Type("400" + Enter);
        await run.Next("'400' came while nothing was asked for");
        await run.Type($"{Interrupt}");
        Finished ended = (await run.End()).Expect(130);

        Assert.Contains("W1200-0002: got no run", ended.Output, StringComparison.Ordinal);
        Assert.DoesNotContain("enclosure seen open", ended.Output, StringComparison.Ordinal);
        Assert.Equal("W1200-0001", _place.Ask<string>("select device from device_outcomes", Evidence));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task Who_leaves_at_the_second_question_has_the_first_device_reported_and_the_worse_exit_code()
    {
        using Started run = await OnATerminal("--device W1200-0001 --device W1200-0002 --json");
        await run.Next("Type the highest bus voltage");
        await run.Type("400" + Enter);
        await Exchange(run, "W1200-0001", "W1200-0002");
        await run.Next("W1200-0002: Type the highest bus voltage");
        await run.Type($"{EndOfFile}");
        Finished ended = (await run.End()).Expect(2);

        Assert.Contains("W1200-0002: got no run", ended.Output, StringComparison.Ordinal);
        Assert.Contains("\"exit_code\": 2", ended.Output, StringComparison.Ordinal);
        Assert.Contains("\"outcome\": \"accepted\"", ended.Output, StringComparison.Ordinal);
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task Serials_on_standard_input_answer_nothing_and_who_leaves_a_rejected_device_ends_the_shift()
    {
        await File.WriteAllTextAsync(
            _place.Path("list.txt"), "W1200-9010\nW1200-0002\n", TestContext.Current.CancellationToken);
        using Started run = await OnATerminal("--device - < list.txt", "W1200-9010");
        await run.Next("W1200-9010: Type the highest bus voltage");
        await run.Type("400" + Enter);
        await run.Next("W1200-9010 is rejected: type where it was put");
        await run.Type($"{EndOfFile}");
        Finished ended = (await run.End()).Expect(2);

        Assert.Contains("nobody said where W1200-9010 was put", ended.Output, StringComparison.Ordinal);
        Assert.Contains("W1200-0002: got no run", ended.Output, StringComparison.Ordinal);
        Assert.Equal(0, _place.Ask<long>("select count(*) from placements", Evidence));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task After_a_trip_the_device_is_put_away_once_the_bus_is_down_and_who_waits_is_named()
    {
        using Started run = await OnATerminal(
            "--device W1200-0001 --device W1200-0002 --device W1200-0003", "W1200-0001", "interlock-opens@fire:3");
        await run.Next("W1200-0001: Type the highest bus voltage");
        await run.Type("400" + Enter);
        await run.Next("below 60 V DC");
        await run.Next("W1200-0001 is stopped: type where it was put");
        await run.Type("quarantine shelf" + Enter);
        await run.Next("W1200-0001 was put: quarantine shelf");
        await run.Next("W1200-0002: got no run");
        await run.Next("W1200-0003: got no run");
        (await run.End()).Expect(4);

        Assert.Equal("quarantine shelf", _place.Ask<string>("select place from placements", Evidence));
        Assert.Equal(1, _place.Ask<long>("select count(*) from device_outcomes", Evidence));
    }

    [Fact]
    [Trait("kind", "slow")]
    public async Task A_bus_that_is_not_proved_down_has_nobody_asked_to_take_the_device_out()
    {
        using Started run = await OnATerminal(
            "--device W1200-0001 --device W1200-0002", "W1200-0001", "bus-stays-up");
        await run.Next("W1200-0001: Type the highest bus voltage");
        await run.Type("400" + Enter);
        await run.Next("THE BUS IS NOT PROVED DOWN");
        await run.Next("it stays in the closed enclosure");
        await run.Next("W1200-0002: got no run");
        Finished ended = (await run.End()).Expect(4);

        Assert.DoesNotContain("type where it was put", ended.Output, StringComparison.Ordinal);
        Assert.Equal(0, _place.Ask<long>("select count(*) from placements", Evidence));
    }

    [Fact]
    public async Task Without_a_terminal_a_name_confirms_one_closing_and_several_devices_are_refused()
    {
        Assert.SkipUnless(OperatingSystem.IsLinux(), "setsid, which takes the terminal away, is Linux's");
        _lab = await LabBench.Start(_place, "--exchange", "by-hand");
        using Started run = _place.Start(
            "setsid",
            ["-w", Workplace.Program, "run", Light(), "--device", "W1200-0001", "--device", "W1200-0002", "--bench",
                _lab.File, "--operator", "op", "--armed-by", "op"]);

        Finished ended = (await run.End()).Expect(2);
        Assert.Contains("confirmed at a terminal after each closing", ended.Error, StringComparison.Ordinal);
        Assert.Equal(0, _place.Ask<long>("select count(*) from device_outcomes", Evidence));
    }

    private async Task Exchange(Started run, string before, string device)
    {
        await run.Next($"open the enclosure, take {before} out, put {device} in");
        await _lab!.Hands("open");
        await run.Next("enclosure seen open");
        await _lab.Hands($"insert {device}");
        await _lab.Hands("close");
        await run.Next($"closed again; {device} is the next");
    }

    /// <summary>The run under <c>script</c>, whose terminal is also its standard input.</summary>
    private async Task<Started> OnATerminal(
        string devices, string inserted = "W1200-0001", string? fault = null)
    {
        Assert.SkipUnless(OperatingSystem.IsLinux() && File.Exists("/usr/bin/script"), "script gives the run a "
            + "terminal; it is Linux's");
        string[] faults = fault is null ? [] : ["--fault", fault];
        _lab = await LabBench.Start(_place, ["--exchange", "by-hand", "--device", inserted, .. faults]);
        string command = $"exec env --default-signal=INT {Workplace.Program} run {Light()} --bench {_lab.File} "
            + $"--operator op {devices}";
        return _place.Start("/usr/bin/script", ["--quiet", "--flush", "--return", "--command", command, "/dev/null"]);
    }

    /// <summary>One point and two captures: what a shift does between devices is tried here.</summary>
    private string Light()
    {
        string text = File.ReadAllText(Workplace.Sequence);
        int rated = text.IndexOf("  - name: rated", StringComparison.Ordinal);
        text = text.Remove(rated, text.IndexOf("captures:", StringComparison.Ordinal) - rated)
            .Replace("valid: 5, at-most: 20", "valid: 2, at-most: 8", StringComparison.Ordinal)
            .Replace("repeat-every: 250 ms", "repeat-every: 50 ms", StringComparison.Ordinal);
        string file = _place.Path("light.yaml");
        File.WriteAllLines(file, text.Split('\n').Where(line => !line.Contains("at: rated", StringComparison.Ordinal)));
        return file;
    }
}
