using BenchRunner.Instruments.Permits;
using BenchRunner.Signals.Units;

namespace BenchRunner.Instruments.Roles;

/// <summary>The DC supply that charges the bus.</summary>
public interface ISupply : ISafeable
{
    /// <summary>What the instrument said it is.</summary>
    InstrumentIdentity Identity { get; }

    /// <summary>Sets over-voltage protection, current limit and voltage, in this order, and reads each back.</summary>
    /// <exception cref="PermitException">The permit is dead or does not reach that far; nothing was set.</exception>
    /// <exception cref="InstrumentException">A read-back differs from what was set, or the error queue holds
    /// something.</exception>
    /// <exception cref="Links.LinkException">A reply was late, malformed or never came.</exception>
    Task Program(Permit permit, Volts voltage, Amperes limit, Volts protection, CancellationToken cancel);

    /// <summary>Switches the output on and reads it back.</summary>
    /// <inheritdoc cref="Program" path="/exception"/>
    Task OutputOn(Permit permit, CancellationToken cancel);

    /// <summary>Switches the output off and reads it back; needs no permit.</summary>
    Task OutputOff(CancellationToken cancel);

    /// <summary>Asks for everything that the supply says of itself.</summary>
    Task<SupplyState> ReadState(CancellationToken cancel);
}
