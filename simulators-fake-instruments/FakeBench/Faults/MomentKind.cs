namespace FakeBench.Faults;

/// <summary>What a fault's moment counts.</summary>
public enum MomentKind
{
    /// <summary>Nothing: from the start.</summary>
    Start,

    /// <summary>Trains fired since the start; the fault is there as the N-th is fired.</summary>
    Fire,

    /// <summary>Voltage of the bank, V, when it first rises to it.</summary>
    Volts,

    /// <summary>Time since the start, s.</summary>
    Seconds,

    /// <summary>Blocks that the scope has answered; the fault is there as the N-th is sent.</summary>
    Block,
}
