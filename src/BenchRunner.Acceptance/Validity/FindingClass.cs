namespace BenchRunner.Acceptance.Validity;

/// <summary>What a finding does to its capture and run.</summary>
public enum FindingClass
{
    /// <summary>Keep the capture, record the finding.</summary>
    Warn,

    /// <summary>The capture is invalid; take another.</summary>
    Retry,

    /// <summary>The run stops.</summary>
    Stop,
}
