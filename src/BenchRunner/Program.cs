using System.CommandLine;
using System.CommandLine.Invocation;
using System.CommandLine.Parsing;
using System.Runtime.CompilerServices;
using BenchRunner.Commands;

namespace BenchRunner;

/// <summary>The command <c>benchrunner</c>: parse, do, say how it ended.</summary>
internal static class Program
{
    /// <summary>The executable itself, to be started once more as another command.</summary>
    public static string Path { get; } = System.IO.Path.Combine(
        AppContext.BaseDirectory, OperatingSystem.IsWindows() ? "benchrunner.exe" : "benchrunner");

    private static async Task<int> Main(string[] arguments)
    {
        if (OpenFiles.WhyTooFew() is { } why)
        {
            System.Console.Error.WriteLine(why);
            return ExitCode.Instrument;
        }

        return await Do(arguments);
    }

    [MethodImpl(MethodImplOptions.NoInlining)]
    private static async Task<int> Do(string[] arguments)
    {
        using var stop = new CancellationTokenSource();
        using SignalGuard signals = SignalGuard.Cancelling(stop);
        ParseResult parsed = CommandTree.Build().Parse(arguments);
        string[] wrong = parsed.Action is ParseErrorAction
            ? [.. parsed.Errors.Select(error => error.Message)]
            : [.. UnknownOptions(parsed)];
        if (parsed.Action is ParseErrorAction || wrong.Length > 0)
        {
            foreach (string message in wrong)
            {
                System.Console.Error.WriteLine(message);
            }

            System.Console.Error.WriteLine(
                "'benchrunner --help' shows the commands, 'benchrunner COMMAND --help' an example.");
            return ExitCode.WrongInput;
        }

        return await Ending.Of(
            () => parsed.InvokeAsync(
                new InvocationConfiguration { ProcessTerminationTimeout = null, EnableDefaultExceptionHandler = false },
                stop.Token),
            stop.Token);
    }

    /// <summary>What looks like an option and was taken for a file: a mistyped one.</summary>
    private static IEnumerable<string> UnknownOptions(ParseResult parsed) => parsed.CommandResult.Children
        .OfType<ArgumentResult>()
        .SelectMany(argument => argument.Tokens)
        .Where(token => token.Value.StartsWith("--", StringComparison.Ordinal))
        .Select(token => $"'{token.Value}' is no option of {parsed.CommandResult.Command.Name}; correct it, or write "
            + $"./{token.Value} if it is a file.");
}
