namespace BenchRunner.Signals.Quantities;

/// <summary>What a quantity says something about: a limit may name those of the position under test and of the circuit.
/// </summary>
public enum QuantityOwner
{
    /// <summary>The firing switch.</summary>
    Switch,

    /// <summary>The freewheeling diode.</summary>
    Diode,

    /// <summary>The circuit: bus, load, loop, gate driver.</summary>
    Circuit,
}
