using System.Globalization;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Safety.Latches;

/// <summary>A trip's mark on a bench, a file beside the bench file: no run starts until a person clears it.</summary>
/// <remarks>
/// The mark is written and flushed before anything else is done about the trip. Clearing moves it, with name and
/// reason, into a history file that only grows. A latch that cannot be read stands.
/// </remarks>
public sealed class LatchFile(string benchFile)
{
    /// <summary>Where the latch of the bench is.</summary>
    public string Path { get; } = System.IO.Path.ChangeExtension(System.IO.Path.GetFullPath(benchFile), ".latch");

    /// <summary>Where cleared latches are kept.</summary>
    public string History => System.IO.Path.ChangeExtension(Path, ".latch-history");

    /// <summary>What the latch says; null where none stands.</summary>
    public string? Read()
    {
        if (OwnFile.LinkTarget(Path) is { } target)
        {
            return $"the latch file {Path} is a symbolic link to {target}; find out who laid it and remove it";
        }

        try
        {
            return File.Exists(Path) ? File.ReadAllText(Path).Trim() : null;
        }
        catch (Exception failure) when (failure is IOException or UnauthorizedAccessException)
        {
            return $"the latch file {Path} cannot be read ({failure.Message})";
        }
    }

    /// <summary>Leaves the mark; a latch that stands already keeps its first reason and gets a further line.</summary>
    /// <exception cref="IOException">The mark could not be written.</exception>
    public void Set(DateTimeOffset at, string reason)
    {
        using var file = OwnFile.Open(Path, FileMode.Append, FileAccess.Write, FileShare.Read);
        using var writer = new StreamWriter(file);
        writer.WriteLine(string.Create(CultureInfo.InvariantCulture, $"{at:yyyy-MM-ddTHH:mm:ssZ} {OneLine(reason)}"));
        writer.Flush();
        file.Flush(flushToDisk: true);
    }

    /// <summary>Takes the latch off.</summary>
    /// <param name="at">When, UTC.</param>
    /// <param name="by">The person.</param>
    /// <param name="because">Why it may be taken off.</param>
    /// <returns>What the latch said; null where none stood: nothing was cleared.</returns>
    /// <exception cref="ArgumentException">Name or reason is empty.</exception>
    public string? Clear(DateTimeOffset at, string by, string because)
    {
        ArgumentException.ThrowIfNullOrWhiteSpace(by);
        ArgumentException.ThrowIfNullOrWhiteSpace(because);
        if (!File.Exists(Path))
        {
            return null;
        }

        string said = File.ReadAllText(Path).Trim();
        string line = string.Create(
            CultureInfo.InvariantCulture,
            $"{at:yyyy-MM-ddTHH:mm:ssZ} cleared by {OneLine(by)}: {OneLine(because)} (was: "
                + $"{OneLine(said)}){Environment.NewLine}");
        File.AppendAllText(History, line);
        File.Delete(Path);
        return said;
    }

    // One entry a line: a reason with a line break must not forge a second entry.
    private static string OneLine(string text) =>
        string.Concat(text.Select(c => char.IsControl(c) ? ' ' : c)).Trim();
}
