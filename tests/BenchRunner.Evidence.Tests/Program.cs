using Xunit.MicrosoftTestingPlatform;
using Xunit.Runner.InProc.SystemConsole;

namespace BenchRunner.Evidence.Tests;

/// <summary>Runs the tests; or, as <c>write-until-killed FILE</c>, is the writer that a test kills.</summary>
internal static class Program
{
    public static async Task<int> Main(string[] args)
    {
        if (args is [DoomedWriter.Argument, var file])
        {
            return DoomedWriter.Write(file);
        }

        return args.Contains("--server") || args.Contains("--internal-msbuild-node")
            ? await TestPlatformTestFramework.RunAsync(args, SelfRegisteredExtensions.AddSelfRegisteredExtensions)
            : await ConsoleRunner.Run(args);
    }
}
