using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Schemas;

namespace BenchRunner.Acceptance.Tolerances;

/// <summary>Reads tolerance files, by which two waveforms are compared. Never throws for what a file holds.</summary>
public static class TolerancesFile
{
    /// <summary>Reads a tolerance file.</summary>
    /// <param name="path">Its path.</param>
    public static Read<ToleranceSet> Read(string path) => FormatReader.Open("tolerances", path, Read);

    /// <summary>Reads the bytes of a tolerance file.</summary>
    /// <param name="source">The file.</param>
    public static Read<ToleranceSet> Read(SourceFile source) =>
        FormatReader.Read(source, TolerancesKeys.Root, Check, file => Build(file, source));

    private static void Check(Fields file, List<Problem> problems)
    {
        var lines = new Dictionary<(string Quantity, string? Definition), int>();
        foreach (Fields limit in file.Blocks("limits"))
        {
            string? definition = limit.Text("definition");
            if (limit.Text("quantity") is { } quantity
                && !lines.TryAdd((quantity, definition), limit.Where.Line))
            {
                problems.Add(new Problem(
                    limit.Where,
                    $"a second tolerance on {quantity}",
                    $"one on a quantity by one definition (first in line {lines[(quantity, definition)]})",
                    "remove one of the two"));
            }
        }
    }

    private static ToleranceSet Build(Fields file, SourceFile source) => new(
        file.Text("tolerances")!,
        file.Text("basis")!,
        [
            .. file.Blocks("limits").Select(limit => new Tolerance(
                limit.Text("quantity")!, limit.Text("definition"), limit.Need("within"), limit.Where)),
        ],
        source);
}
