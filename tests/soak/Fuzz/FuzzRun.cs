namespace BenchRunner.Soak.Fuzz;

/// <summary>Whatever an instrument may send: through the pure parsers, and through a session over a real socket.</summary>
/// <remarks>
/// What must hold of each message: a value or a documented exception (<c>ReplyException</c>; over the socket
/// <c>LinkException</c>), no more memory than <see cref="ParserFuzz.Bound"/> says, and an end within the deadline.
/// </remarks>
internal static class FuzzRun
{
    /// <summary>Failures after which it is given up: they repeat themselves.</summary>
    public const int MostFailures = 20;

    /// <summary>Messages of the soak; continuous integration runs a hundredth.</summary>
    public const int ParserMessages = 10_000_000, SocketMessages = 20_000;

    /// <summary>Runs both.</summary>
    /// <param name="seed">Replays it; message n of a seed is always the same.</param>
    /// <param name="parserMessages">Messages through the parsers.</param>
    /// <param name="socketMessages">Messages over the socket.</param>
    /// <param name="output">Takes what is tried and what failed.</param>
    /// <returns>A line a failure; none where all held.</returns>
    public static IReadOnlyList<string> Run(ulong seed, int parserMessages, int socketMessages, TextWriter output)
    {
        output.WriteLine(FormattableString.Invariant(
            $"fuzz: seed {seed}, {parserMessages} messages parsed, {socketMessages} over a socket"));
        var failures = new List<string>();
        ParserFuzz.Run(seed, parserMessages, failures);
        SocketFuzz.Run(seed, socketMessages, failures).GetAwaiter().GetResult();
        foreach (string failure in failures)
        {
            output.WriteLine($"fuzz: FAILED {failure}");
        }

        return failures;
    }
}
