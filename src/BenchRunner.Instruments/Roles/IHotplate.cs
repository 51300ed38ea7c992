namespace BenchRunner.Instruments.Roles;

/// <summary>The plate that brings the device to the temperature of an operating point.</summary>
/// <remarks>Its safe side is heating off; the plate stays hot for long after.</remarks>
public interface IHotplate : ISafeable
{
    /// <summary>What the instrument said it is.</summary>
    InstrumentIdentity Identity { get; }

    /// <summary>Sets the temperature and switches the heating on, and reads both back. Does not wait for the
    /// plate.</summary>
    /// <param name="celsius">Temperature wanted, degC.</param>
    /// <param name="cancel">Ends the exchange; whether the plate heats is then unknown.</param>
    /// <exception cref="ArgumentOutOfRangeException">No finite number.</exception>
    /// <exception cref="InstrumentException">A read-back differs from what was set, or the error queue holds
    /// something.</exception>
    /// <exception cref="Links.LinkException">A reply was late, malformed or never came.</exception>
    Task Heat(double celsius, CancellationToken cancel);

    /// <summary>Measures the plate's temperature.</summary>
    /// <returns>Temperature, degC.</returns>
    /// <exception cref="InstrumentException">The reading is an overload or no number.</exception>
    /// <exception cref="Links.LinkException">A reply was late, malformed or never came.</exception>
    Task<double> Read(CancellationToken cancel);
}
