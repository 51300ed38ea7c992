namespace BenchRunner.Safety.Guardians;

/// <summary>What kind of thing the guardian heard.</summary>
public enum HeardKind
{
    /// <summary>A beat: see <see cref="BeatKind.Polled"/>.</summary>
    Polled,

    /// <summary>A beat: see <see cref="BeatKind.MakingSafe"/>.</summary>
    MakingSafe,

    /// <summary>A beat: see <see cref="BeatKind.Done"/>.</summary>
    Done,

    /// <summary>The runner leaves without proof that the bus is down: the guardian goes on, and lets it leave.</summary>
    Left,

    /// <summary>Something that is no beat, or out of its order.</summary>
    Malformed,

    /// <summary>The pipe has closed: the runner is gone.</summary>
    Ended,
}
