namespace BenchRunner.Safety.Guardians;

/// <summary>What a heartbeat tells the guardian.</summary>
public enum BeatKind
{
    /// <summary>The watch has made one complete poll that found nothing, and the runner's work is in time.</summary>
    Polled,

    /// <summary>The runner is on its way to the safe state: the guardian switches off beside it, and lets it live for as long
    /// as a bank may take to fall, so that it can prove the bank down and seal its evidence.</summary>
    MakingSafe,

    /// <summary>The bus is proved down and nothing will be energised any more: the guardian may leave.</summary>
    Done,
}
