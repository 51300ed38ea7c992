namespace FakeBench.Physics;

/// <summary>The body diode of one place: lumped charge, so that reverse recovery comes out of the circuit.</summary>
/// <remarks>
/// Lauritzen and Ma, "A simple diode model with reverse recovery", IEEE Trans. Power Electronics 6 (1991):
/// iD = (qE - qM)/TM, dqM/dt = -qM/tau + (qE - qM)/TM, qE = Is tau (exp(v/nVt) - 1).
/// Here iE = qE/TM, so its saturation current is <see cref="InjectionCurrent"/> = Is tau/TM.
/// </remarks>
public sealed record DiodeParts
{
    /// <summary>No diode at all: the place of an open one.</summary>
    public static DiodeParts None { get; } = new()
    {
        InjectionCurrent = 0,
        EmissionVoltage = 1,
        TransitTime = 1e-8,
        Lifetime = 1e-8,
    };

    /// <summary>Is tau/TM, A; 0 for no diode.</summary>
    public required double InjectionCurrent { get; init; }

    /// <summary>n Vt, V; above 0.</summary>
    public required double EmissionVoltage { get; init; }

    /// <summary>Diffusion transit time TM, s; above 0. Long against tau: soft recovery.</summary>
    public required double TransitTime { get; init; }

    /// <summary>Carrier lifetime tau, s; above 0.</summary>
    public required double Lifetime { get; init; }

    /// <summary>Series resistance of the diode alone, Ohm.</summary>
    public double SeriesResistance { get; init; }

    /// <summary>Junction capacitance at 0 V beside the switch's own, F; 0 where the switch's holds it all.</summary>
    public double JunctionCapacitance { get; init; }

    /// <summary>Built-in voltage of that capacitance, V; above 0.</summary>
    public double JunctionVoltage { get; init; } = 1;

    /// <summary>Grading exponent of that capacitance, 1; below 1.</summary>
    public double JunctionGrading { get; init; } = 0.5;
}
