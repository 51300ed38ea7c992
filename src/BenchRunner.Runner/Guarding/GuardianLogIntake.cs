using System.Text.Json;
using BenchRunner.Acceptance.Events;
using BenchRunner.Evidence.Stores;

namespace BenchRunner.Runner.Guarding;

/// <summary>Takes what a guardian did after its run into the evidence of the next run on that bench.</summary>
/// <remarks>The log is moved aside, to <c>….taken</c>, only after its events are stored: a run that dies in between takes
/// it once more. Lines that are cut short or unreadable are stored as they are, and never stop a run.</remarks>
public sealed class GuardianLogIntake(string path)
{
    /// <summary>Where a log goes whose events are stored.</summary>
    public string Taken => path + ".taken";

    /// <summary>The events of the log, marked as the guardian's; none where there is no log.</summary>
    /// <param name="now">Time of a line that has none of its own, UTC.</param>
    public IReadOnlyList<BenchEvent> Read(DateTimeOffset now)
    {
        try
        {
            return File.Exists(path) ? [.. File.ReadLines(path).Select(line => Event(line, now))] : [];
        }
        catch (Exception failure) when (failure is IOException or UnauthorizedAccessException)
        {
            return [Unreadable(now, $"its log {path} cannot be read ({failure.Message})")];
        }
    }

    /// <summary>Stores the log's events with a run, then moves the log aside.</summary>
    /// <returns>What was stored.</returns>
    /// <exception cref="Evidence.EvidenceException">The store has failed; the log stays.</exception>
    public IReadOnlyList<BenchEvent> Take(RunWriter run, DateTimeOffset now)
    {
        ArgumentNullException.ThrowIfNull(run);
        IReadOnlyList<BenchEvent> events = Read(now);
        foreach (BenchEvent happened in events)
        {
            run.AddEvent(happened);
        }

        try
        {
            if (File.Exists(path))
            {
                File.AppendAllText(Taken, File.ReadAllText(path));
                File.Delete(path);
            }
        }
        catch (Exception failure) when (failure is IOException or UnauthorizedAccessException)
        {
            run.AddEvent(Unreadable(now, $"its log {path} cannot be moved aside ({failure.Message})"));
        }

        return events;
    }

    private static BenchEvent Event(string line, DateTimeOffset now)
    {
        try
        {
            BenchEvent? said = JsonSerializer.Deserialize(line, GuardianJson.Default.BenchEvent);
            return said is { Kind: not null, Message: not null, Source: not null } ? Marked(said) : Cut(line, now);
        }
        catch (JsonException)
        {
            return Cut(line, now);
        }
    }

    private static BenchEvent Marked(BenchEvent said) => said with
    {
        Source = "guardian",
        Kind = said.Kind.StartsWith("guardian-", StringComparison.Ordinal) ? said.Kind : "guardian-" + said.Kind,
    };

    private static BenchEvent Cut(string line, DateTimeOffset now) =>
        Unreadable(now, $"a line of its log is cut short: {Instruments.Replies.Printable.Text(line)}");

    private static BenchEvent Unreadable(DateTimeOffset now, string what) =>
        new(now, "guardian", Severity.Warning, "guardian-log-damaged", what);
}
