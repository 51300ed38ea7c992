namespace BenchRunner.Safety.Guardians;

/// <summary>How the guardian's watch ended.</summary>
public enum GuardianEnding
{
    /// <summary>The runner said that its work is done: nothing to do.</summary>
    NotNeeded,

    /// <summary>It acted, and the bus is proved down.</summary>
    ProvedDown,

    /// <summary>It acted, and could not prove the bus down: the bench counts as energised.</summary>
    NotProved,
}
