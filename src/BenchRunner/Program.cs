using System.CommandLine;
using System.CommandLine.Invocation;
using BenchRunner.Commands;

namespace BenchRunner;

/// <summary>The command <c>benchrunner</c>: parse, do, say how it ended.</summary>
internal static class Program
{
    private static async Task<int> Main(string[] arguments)
    {
        using var stop = new CancellationTokenSource();
        using SignalGuard signals = SignalGuard.Cancelling(stop);
        ParseResult parsed = CommandTree.Build().Parse(arguments);
        if (parsed.Action is ParseErrorAction)
        {
            foreach (System.CommandLine.Parsing.ParseError error in parsed.Errors)
            {
                System.Console.Error.WriteLine(error.Message);
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
}
