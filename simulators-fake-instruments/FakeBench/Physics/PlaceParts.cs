namespace FakeBench.Physics;

/// <summary>Everything that fills one place, low or high, of the half bridge.</summary>
/// <param name="Switch">The transistor.</param>
/// <param name="Diode">Its body diode.</param>
/// <param name="Package">Leads and package.</param>
public sealed record PlaceParts(SwitchParts Switch, DiodeParts Diode, PackageParts Package)
{
    /// <summary>Delay after the driver's off2 at which the part turns into a short, s; null: it lives.</summary>
    public double? DiesAfterOff2 { get; init; }

    /// <summary>Conductance above which a place counts as shorted, S.</summary>
    public const double ShortConductance = 1;

    /// <summary>Whether the place is a short, whatever its gate says.</summary>
    public bool IsShorted => Switch.Leakage >= ShortConductance;

    /// <summary>The same place as a short of <paramref name="resistance"/> Ohm.</summary>
    public PlaceParts Shorted(double resistance = 0.01) =>
        this with { Switch = Switch with { Leakage = 1 / resistance }, DiesAfterOff2 = null };
}
