namespace BenchRunner.Safety.Guardians;

/// <summary>What the guardian does next.</summary>
public enum GuardianDeed
{
    /// <summary>Listens on.</summary>
    Listen,

    /// <summary>Switches off by its own links beside the runner, and listens on.</summary>
    SwitchOff,

    /// <summary>Ends the runner and makes the bench safe.</summary>
    Act,

    /// <summary>Makes the bench safe; the runner leaves by itself.</summary>
    TakeOver,

    /// <summary>Leaves: the bus is proved down.</summary>
    Leave,
}
