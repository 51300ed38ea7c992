namespace BenchRunner.Acceptance.Events;

/// <summary>How much an event matters.</summary>
public enum Severity
{
    /// <summary>For whoever follows every step.</summary>
    Detail,

    /// <summary>The course of the run.</summary>
    Information,

    /// <summary>Worth a look; the run goes on.</summary>
    Warning,

    /// <summary>Something failed.</summary>
    Error,

    /// <summary>A trip, or a bus that is not proved down.</summary>
    Alarm,
}
