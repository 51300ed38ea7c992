namespace EndToEnd;

/// <summary>What stands between a real bench and its bus: a person at a terminal, asked after the cautions.</summary>
public sealed class ConfirmationTests : IDisposable
{
    private const string Question = "Type the highest bus voltage";
    private readonly Workplace _place = new();
    private LabBench? _lab;

    public void Dispose()
    {
        _lab?.Dispose();
        _place.Dispose();
    }

    [Fact]
    public async Task The_bus_voltage_typed_at_the_terminal_lets_the_bench_be_energised()
    {
        using Started run = await OnATerminal();
        await run.Line(line => line.Contains(Question, StringComparison.Ordinal));
        await run.Input.WriteAsync("600\n");
        await run.Input.FlushAsync(TestContext.Current.CancellationToken);
        Finished ended = (await run.End()).Expect(0);

        Assert.Contains("it can kill", ended.Output, StringComparison.Ordinal);
        Assert.DoesNotContain("SIMULATED", ended.Output, StringComparison.Ordinal);
        Assert.Equal(0, _place.Ask<long>("select simulated from device_outcomes", Evidence));
        Assert.Equal("accepted", _place.Ask<string>("select outcome from device_outcomes", Evidence));
    }

    [Theory]
    [InlineData("", "no\n")]
    [InlineData("", "400\n")]
    [InlineData("600\n600\n", "\n")]
    public async Task Anything_else_ends_the_run_and_what_was_typed_before_the_question_answers_nothing(
        string before, string answer)
    {
        using Started run = await OnATerminal();
        await run.Input.WriteAsync(before);
        await run.Input.FlushAsync(TestContext.Current.CancellationToken);
        await run.Line(line => line.Contains(Question, StringComparison.Ordinal));
        await run.Input.WriteAsync(answer);
        await run.Input.FlushAsync(TestContext.Current.CancellationToken);
        Finished ended = (await run.End()).Expect(2);

        Assert.Contains("nothing was energised", ended.Output, StringComparison.Ordinal);
        Assert.DoesNotContain("charging the bus", ended.Output, StringComparison.Ordinal);
        Assert.Equal(0, _place.Ask<long>("select count(*) from device_outcomes", Evidence));
    }

    [Fact]
    public async Task A_bench_exchanged_by_other_hands_takes_one_device_a_call()
    {
        _lab = await LabBench.Start(_place);

        Finished refused = (await _place.Run(
            "run", Workplace.Sequence, "--device", "W1200-0001", "--device", "W1200-0002", "--bench", _lab.File,
            "--operator", "op", "--armed-by", "op")).Expect(2);
        Assert.Contains("one device a call", refused.Error, StringComparison.Ordinal);
    }

    private string Evidence => _place.Path("bench-evidence.db");

    /// <summary>The run under <c>script</c>, which gives it a terminal of its own.</summary>
    private async Task<Started> OnATerminal()
    {
        Assert.SkipUnless(OperatingSystem.IsLinux() && File.Exists("/usr/bin/script"), "script gives the run a "
            + "terminal; it is Linux's");
        _lab = await LabBench.Start(_place);
        string command =
            $"{Workplace.Program} run {Workplace.Sequence} --device W1200-0001 --bench {_lab.File} --operator op";
        return _place.Start("/usr/bin/script", ["--quiet", "--flush", "--return", "--command", command, "/dev/null"]);
    }
}
