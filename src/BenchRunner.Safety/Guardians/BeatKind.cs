namespace BenchRunner.Safety.Guardians;

/// <summary>What a beat tells the guardian.</summary>
public enum BeatKind
{
    /// <summary>A complete poll found nothing, and the run's progress is in time.</summary>
    Polled,

    /// <summary>The run is on its way to the safe state; sent each time round while the bus is being proved down.</summary>
    MakingSafe,

    /// <summary>The bus is proved down and the run ends: the guardian may leave.</summary>
    Done,
}
