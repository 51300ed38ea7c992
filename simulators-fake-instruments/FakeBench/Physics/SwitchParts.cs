namespace FakeBench.Physics;

/// <summary>The transistor of one place of the half bridge: channel, capacitances, avalanche, leakage.</summary>
/// <remarks>
/// Channel as in the power-transistor models of circuit simulators: with w = a ln(1 + exp((vgs - Vto)/a)) it carries
/// Kp w²/2 when saturated and Kp z (w - z/2) otherwise, z = mtr (vds - Rd i).
/// Gate-drain capacitance: between <see cref="GateDrainMinimum"/> and <see cref="GateDrainMaximum"/>, along tanh above
/// and arctan below vgd = 0. Not to be confused with <see cref="DiodeParts"/>, the body diode beside it.
/// </remarks>
public sealed record SwitchParts
{
    /// <summary>Threshold voltage Vto, V.</summary>
    public required double Threshold { get; init; }

    /// <summary>Width a of the transition below threshold, V; above 0.</summary>
    public double ThresholdSoftness { get; init; } = 0.12;

    /// <summary>Transconductance Kp, A/V²; 0 for a switch whose channel is gone.</summary>
    public required double Transconductance { get; init; }

    /// <summary>Factor mtr on the drain voltage in the triode region, 1.</summary>
    public double TriodeFactor { get; init; } = 0.7;

    /// <summary>Drain resistance Rd in series with the channel, Ohm.</summary>
    public required double DrainResistance { get; init; }

    /// <summary>Source resistance Rs, common to gate and power loop, Ohm; acts in the low place only.</summary>
    public double SourceResistance { get; init; }

    /// <summary>Gate resistance Rgi inside the part, Ohm.</summary>
    public required double GateResistance { get; init; }

    /// <summary>Gate-source capacitance, F.</summary>
    public required double GateSource { get; init; }

    /// <summary>Gate-drain capacitance far in the blocking state, F.</summary>
    public required double GateDrainMinimum { get; init; }

    /// <summary>Gate-drain capacitance far in the conducting state, F.</summary>
    public required double GateDrainMaximum { get; init; }

    /// <summary>Steepness A of the gate-drain capacitance, 1/V.</summary>
    public required double GateDrainSteepness { get; init; }

    /// <summary>Junction capacitance at 0 V, drain to source: Cj (1 + v/Vj)^-M, F.</summary>
    public required double JunctionCapacitance { get; init; }

    /// <summary>Built-in voltage Vj of the junction capacitance, V; above 0.</summary>
    public double JunctionVoltage { get; init; } = 1.5;

    /// <summary>Grading exponent M of the junction capacitance, 1; below 1.</summary>
    public double JunctionGrading { get; init; } = 0.48;

    /// <summary>Constant part Cl of the drain-source capacitance, F; with the junction's it must stay above
    /// 0.</summary>
    public required double FixedCapacitance { get; init; }

    /// <summary>Breakdown voltage BV, V.</summary>
    public double Breakdown { get; init; } = double.PositiveInfinity;

    /// <summary>Slope resistance Rav of the avalanche, Ohm; above 0.</summary>
    public double AvalancheResistance { get; init; } = 0.5;

    /// <summary>Leakage G from drain to source, S; a short is a large one (100 S is 10 mOhm).</summary>
    public double Leakage { get; init; } = 10e-9;
}
