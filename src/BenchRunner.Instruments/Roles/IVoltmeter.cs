using BenchRunner.Signals.Units;

namespace BenchRunner.Instruments.Roles;

/// <summary>The independent voltmeter on the capacitor bank's own terminals.</summary>
public interface IVoltmeter
{
    /// <summary>What the instrument said it is.</summary>
    InstrumentIdentity Identity { get; }

    /// <summary>Measures the voltage of the bank.</summary>
    /// <exception cref="InstrumentException">The reading is an overload or no number.</exception>
    /// <exception cref="Links.LinkException">A reply was late, malformed or never came.</exception>
    Task<Volts> Read(CancellationToken cancel);
}
