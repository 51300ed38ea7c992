namespace EndToEnd;

/// <summary>How a process ended.</summary>
internal sealed record Finished(int ExitCode, string Output, string Error)
{
    /// <summary>Everything it said, for a failing test's message.</summary>
    public string All => $"exit {ExitCode}\n--- out\n{Output}\n--- error\n{Error}";

    /// <summary>The lines of standard output that are not empty.</summary>
    public string[] Lines => Output.Split('\n', StringSplitOptions.RemoveEmptyEntries | StringSplitOptions.TrimEntries);

    public Finished Expect(int exitCode)
    {
        Assert.True(ExitCode == exitCode, $"expected exit {exitCode}\n{All}");
        return this;
    }
}
