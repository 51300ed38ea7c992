namespace BenchRunner.Instruments.Roles;

/// <summary>How an acquisition ended.</summary>
public enum AcquisitionEnd
{
    /// <summary>It is complete.</summary>
    Complete,

    /// <summary>The scope still waited for its trigger at the deadline; the acquisition was aborted.</summary>
    NotTriggered,

    /// <summary>The scope was triggered and had not come to its end at the deadline; the acquisition was
    /// aborted.</summary>
    NotCompleted,
}
