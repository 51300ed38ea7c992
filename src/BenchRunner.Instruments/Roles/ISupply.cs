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
    /// <exception cref="SettingChangedException">What this program had set before is not what stands now; nothing was
    /// overwritten.</exception>
    /// <exception cref="InstrumentException">A read-back differs from what was set, or the error queue holds
    /// something.</exception>
    /// <exception cref="Links.LinkException">A reply was late, malformed or never came.</exception>
    Task Program(Permit permit, Volts voltage, Amperes limit, Volts protection, CancellationToken cancel);

    /// <summary>Asks back every setting that this program made and that still stands. Changes nothing.</summary>
    /// <exception cref="SettingChangedException">One is another than was set: somebody else controls the
    /// instrument, or it was switched off and on. Nothing is put right.</exception>
    /// <exception cref="InstrumentException">A reading is no number.</exception>
    /// <exception cref="Links.LinkException">A reply was late, malformed or never came.</exception>
    Task CheckSettings(CancellationToken cancel);

    /// <summary>Switches the output on and reads it back.</summary>
    /// <inheritdoc cref="Program" path="/exception"/>
    Task OutputOn(Permit permit, CancellationToken cancel);

    /// <summary>Switches the output off and reads it back; needs no permit.</summary>
    Task OutputOff(CancellationToken cancel);

    /// <summary>Asks for everything that the supply says of itself.</summary>
    Task<SupplyState> ReadState(CancellationToken cancel);
}
