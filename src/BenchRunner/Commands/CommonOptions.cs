using System.CommandLine;

namespace BenchRunner.Commands;

/// <summary>Options that several commands share.</summary>
internal static class CommonOptions
{
    public static Option<bool> Json() =>
        new("--json") { Description = "one JSON document on standard output and nothing else there" };

    public static Option<string?> Bench() =>
        new("--bench") { Description = "the bench file; without it a simulated bench is started" };

    public static Option<string?> Evidence() =>
        new("--evidence") { Description = "the evidence file" };
}
