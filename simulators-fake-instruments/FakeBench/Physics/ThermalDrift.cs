namespace FakeBench.Physics;

/// <summary>What a part's parameters do with its temperature.</summary>
/// <remarks>
/// Nominal values hold up to 25 degC. Above it, a kelvin: drain resistance +0.5 %, threshold −5 mV, carrier lifetime
/// +0.5 % of their values at 25 degC. Rounded figures of the usual size for silicon carbide (common practice, no
/// source); linear, and the same for every part.
/// </remarks>
public static class ThermalDrift
{
    /// <summary>Temperature up to which the values are nominal, degC.</summary>
    public const double Nominal = 25;

    /// <summary>Drain resistance, relative, 1/K.</summary>
    public const double DrainResistance = 5e-3;

    /// <summary>Threshold, V/K.</summary>
    public const double Threshold = -5e-3;

    /// <summary>Carrier lifetime, relative, 1/K.</summary>
    public const double Lifetime = 5e-3;

    /// <summary>A place at a temperature.</summary>
    /// <param name="place">The place at 25 degC.</param>
    /// <param name="celsius">Its temperature, degC.</param>
    public static PlaceParts At(PlaceParts place, double celsius)
    {
        ArgumentNullException.ThrowIfNull(place);
        double rise = celsius - Nominal;
        return rise <= 0 ? place : place with
        {
            Switch = place.Switch with
            {
                DrainResistance = place.Switch.DrainResistance * (1 + (DrainResistance * rise)),
                Threshold = place.Switch.Threshold + (Threshold * rise),
            },
            Diode = place.Diode with { Lifetime = place.Diode.Lifetime * (1 + (Lifetime * rise)) },
        };
    }
}
