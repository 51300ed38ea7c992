namespace BenchRunner.Instruments.Sessions;

/// <summary>Sorts of event on the way to an instrument.</summary>
public enum InstrumentEventKind
{
    /// <summary>Connected and identified.</summary>
    Connected,

    /// <summary>The error queue held entries that no setting of ours is blamed for, e.g. at the start.</summary>
    Errors,

    /// <summary>A reply was lost, late, doubled or malformed; the next exchange begins with a
    /// resynchronisation.</summary>
    Doubt,

    /// <summary>An exchange was broken off by our side; its reply will come late and be dropped.</summary>
    Cancelled,

    /// <summary>The link was resynchronised: what came late was dropped.</summary>
    Resynchronised,

    /// <summary>The link is lost.</summary>
    Broken,

    /// <summary>The link was opened again and the same instrument answered.</summary>
    Reconnected,

    /// <summary>Something the instrument gave was not used, e.g. a trace whose scale is not the one asked
    /// for.</summary>
    Discarded,
}
