namespace BenchRunner.Safety.SafeStates;

/// <summary>How the bank discharges through the bleeder: V(t) = V0 e^(−t/τ), τ = R C.</summary>
/// <param name="Resistance">Bleeder, Ω.</param>
/// <param name="Capacitance">Bank, F.</param>
public sealed record Discharge(double Resistance, double Capacitance)
{
    /// <summary>Time constant, s.</summary>
    public double TimeConstant => Resistance * Capacitance;

    /// <summary>Time from one voltage down to another, s; 0 where it is not above.</summary>
    /// <example>600 V to 60 V with 25 kΩ and 50 µF: 1.25 s · ln 10 = 2.88 s.</example>
    public double TimeTo(double from, double to) => from <= to ? 0 : TimeConstant * Math.Log(from / to);
}
