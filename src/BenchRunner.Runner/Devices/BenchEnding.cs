namespace BenchRunner.Runner.Devices;

/// <summary>How the bench came out of a device's run.</summary>
public enum BenchEnding
{
    /// <summary>The safe state was reached and proved; the next device may come.</summary>
    Proved,

    /// <summary>Safety tripped, or the safe state is not proved: nothing more is done on this bench.</summary>
    Tripped,

    /// <summary>An instrument or link failed; the safe state is proved.</summary>
    InstrumentFailed,

    /// <summary>The evidence could not be written; the safe state is proved.</summary>
    EvidenceFailed,

    /// <summary>The operator interrupted; the safe state is proved.</summary>
    Interrupted,

    /// <summary>A fault of this program; the safe state is proved.</summary>
    Fault,
}
