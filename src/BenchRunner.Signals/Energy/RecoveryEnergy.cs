using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Quantities;

namespace BenchRunner.Signals.Energy;

/// <summary>Energy lost in the recovering diode, J: <c>err</c>, definition <c>e/recovery</c>.</summary>
public static class RecoveryEnergy
{
    /// <summary>∫ vds_high · irr dt over the interval of <c>qrr/chord-90-25</c>.</summary>
    /// <param name="voltage">Voltage of the diode's position, V, uniform, reverse positive.</param>
    /// <param name="irr">Recovery current, A, on the same grid, reverse positive.</param>
    /// <param name="dt">Sample interval, s.</param>
    /// <param name="charge">The charge whose interval is taken.</param>
    /// <returns>The energy, J.</returns>
    /// <remarks>Contains the energy stored in the output capacitance, which comes back later.</remarks>
    public static Reading Form(ReadOnlySpan<double> voltage, ReadOnlySpan<double> irr, double dt, Reading charge) =>
        charge.HasValue
            ? Reading.Of(Integral.OfProduct(voltage, irr, charge.From, charge.To) * dt, charge.From, charge.To)
            : charge;
}
