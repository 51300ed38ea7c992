namespace EndToEnd;

/// <summary>Bad input: one clear message, the documented exit code, nothing energised, nothing lost.</summary>
public sealed class InputTests : IDisposable
{
    private readonly Workplace _place = new();

    public void Dispose() => _place.Dispose();

    [Fact]
    public async Task A_missing_file_is_named() =>
        await Refused(["run", "nowhere.yaml", "--device", "W1200-0001"], "nowhere.yaml", "there is no such file");

    [Fact]
    public async Task An_unknown_key_gets_the_nearest_known_one()
    {
        string file = _place.SequenceFile(("leakage: 2 mA", "leekage: 2 mA"));
        int line = Line(file, "leekage");

        await Refused(["run", file, "--device", "W1200-0001"], $"{file}:{line}:1", "leekage", "leakage");
    }

    [Fact]
    public async Task A_unit_of_the_wrong_dimension_names_the_unit_wanted()
    {
        string file = _place.SequenceFile(("load-current: 20 A", "load-current: 20 V"));

        await Refused(["run", file, "--device", "W1200-0001"], $"{file}:{Line(file, "20 V")}:", "20 V", "A");
    }

    [Fact]
    public async Task A_point_above_the_envelope_is_refused_with_file_and_line()
    {
        string file = _place.SequenceFile(("bus-voltage: 600 V", "bus-voltage: 1250 V"));

        await Refused(["run", file, "--device", "W1200-0001"], $"{file}:{Line(file, "1250 V")}:", "1250 V", "900 V");
    }

    [Theory]
    [InlineData("X-1")]
    [InlineData("W1200-0001; --")]
    [InlineData("../W1200-0001")]
    public async Task A_serial_of_the_wrong_form_is_refused(string serial) =>
        await Refused(["run", Workplace.Sequence, "--device", serial], "--device", "serial");

    [Fact]
    public async Task An_unreachable_instrument_ends_with_5_and_says_which()
    {
        string bench = RealBench();

        Finished run = (await _place.Run(
            "run", Workplace.Sequence, "--device", "W1200-0001", "--bench", bench,
            "--operator", "op", "--armed-by", "op")).Expect(5);

        Assert.Contains("interlock: tcp 127.0.0.1", run.Error, StringComparison.Ordinal);
        Assert.Equal(0, _place.Ask<long>("select count(*) from device_outcomes", _place.Path("bench-evidence.db")));
    }

    [Fact]
    public async Task A_real_bench_without_operator_is_refused() =>
        await Refused(["run", Workplace.Sequence, "--device", "W1200-0001", "--bench", RealBench()], "--operator");

    [Fact]
    public async Task A_real_bench_without_a_terminal_or_a_name_is_refused()
    {
        Assert.SkipUnless(OperatingSystem.IsLinux(), "setsid, which takes the terminal away, is Linux's");
        using Started run = _place.Start(
            "setsid",
            ["-w", Workplace.Program, "run", Workplace.Sequence, "--device", "W1200-0001", "--bench", RealBench(),
                "--operator", "op"]);

        Assert.Contains("--armed-by", (await run.End()).Expect(2).Error, StringComparison.Ordinal);
    }

    [Theory]
    [InlineData("analyse")]
    [InlineData("plan")]
    public async Task A_mistyped_option_is_not_taken_for_a_file(string command) =>
        await Refused([command, "--setings"], $"'--setings' is no option of {command}");

    [Fact]
    public async Task A_device_given_twice_is_refused() => await Refused(
        ["run", Workplace.Sequence, "--device", "W1200-0001", "--device", "W1200-0001"],
        "W1200-0001 is given more than once");

    [Theory]
    [InlineData("low", null, "--companion is missing")]
    [InlineData("low", "W1200-0001", "also a --device")]
    [InlineData("low", "X-1", "--companion")]
    [InlineData("both", "W1200-0002", "fills both places")]
    public async Task A_companion_is_given_where_there_is_one_and_only_there(
        string position, string? companion, string said)
    {
        string file = _place.SequenceFile(("position: both", $"position: {position}"));
        string[] given = companion is null ? [] : ["--companion", companion];

        await Refused(["run", file, "--device", "W1200-0001", .. given], said);
    }

    [Fact]
    public async Task A_misspelt_option_is_said() =>
        await Refused(["run", Workplace.Sequence, "--devise", "W1200-0001"], "--device");

    [Fact]
    public async Task Every_command_has_help_with_an_example()
    {
        foreach (string command in (string[])["plan", "run", "analyse", "compare", "query", "quantities", "schema"])
        {
            Finished help = (await _place.Run(command, "--help")).Expect(0);
            Assert.Contains($"Example: benchrunner {command}", help.Output, StringComparison.Ordinal);
            Assert.Contains($"benchrunner {command} ",
                help.Output[help.Output.IndexOf("Usage:", StringComparison.Ordinal)..], StringComparison.Ordinal);
        }
    }

    private async Task Refused(string[] arguments, params string[] said)
    {
        Finished run = (await _place.Run(arguments)).Expect(2);

        Assert.All(said, text => Assert.Contains(text, run.Error, StringComparison.Ordinal));
        Assert.False(File.Exists(_place.Evidence), "evidence was made though nothing was to be run");
    }

    /// <summary>A bench file without a fake block whose links lead nowhere: port 1 of this machine refuses.</summary>
    private string RealBench()
    {
        string file = _place.FakeBenchFile("{ seed: 1, pace: 5 }");
        string text = File.ReadAllText(file);
        text = string.Join('\n', text.Split('\n').Where(line => !line.StartsWith("fake:", StringComparison.Ordinal)))
            .Replace("127.0.0.1:0", "127.0.0.1:1", StringComparison.Ordinal)
            .Replace("serial auto", "tcp 127.0.0.1:1", StringComparison.Ordinal);
        File.WriteAllText(file, text);
        return file;
    }

    private static int Line(string file, string text) =>
        1 + Array.FindIndex(File.ReadAllLines(file), line => line.Contains(text, StringComparison.Ordinal));
}
