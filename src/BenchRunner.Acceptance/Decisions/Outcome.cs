namespace BenchRunner.Acceptance.Decisions;

/// <summary>Outcome of a device in a run.</summary>
public enum Outcome
{
    /// <summary>Every limit conforms.</summary>
    Accepted,

    /// <summary>A limit fails, or the device is short, open, leaking or dead.</summary>
    Rejected,

    /// <summary>No limit fails, and at least one is undecided.</summary>
    Undecided,

    /// <summary>Too few valid captures.</summary>
    NotMeasured,

    /// <summary>Bench, safety chain or operator ended the run; never the device's own fault.</summary>
    Stopped,
}
