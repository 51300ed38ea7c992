using System.Globalization;
using BenchRunner.Acceptance.Files;

namespace BenchRunner.Safety.SafeStates;

/// <summary>How the bank discharges through the bleeder: V(t) = V0 e^(−t/τ), τ = R C.</summary>
/// <param name="Resistance">Bleeder, Ω.</param>
/// <param name="Capacitance">Bank, F.</param>
public sealed record Discharge(double Resistance, double Capacitance)
{
    /// <summary>Time constant, s.</summary>
    public double TimeConstant => Resistance * Capacitance;

    /// <summary>Energy in the bank, ½CV², J.</summary>
    /// <example>50 µF at 800 V: 16 J.</example>
    public double Energy(double voltage) => 0.5 * Capacitance * voltage * voltage;

    /// <summary>A voltage with the energy that the bank holds at it, e.g. <c>400.0 V (4 J in the bank)</c>.</summary>
    public string Words(double voltage) => string.Create(
        CultureInfo.InvariantCulture, $"{voltage:0.0} V ({SiText.Format(Energy(voltage), "J", 3)} in the bank)");

    /// <summary>Time from one voltage down to another, s; 0 where it is not above.</summary>
    /// <example>600 V to 60 V with 25 kΩ and 50 µF: 1.25 s · ln 10 = 2.88 s.</example>
    public double TimeTo(double from, double to) => from <= to ? 0 : TimeConstant * Math.Log(from / to);
}
