namespace FakeBench.Physics;

/// <summary>Rates of change of a device's states g, v, m (V/s, V/s, A/s), and their slopes by states and
/// currents.</summary>
internal struct DeviceRates
{
    public double G, V, M;
    public double GByG, GByV, GByM, GByJ, GById;
    public double VByG, VByV, VByM, VByJ, VById;
    public double MByV, MByM;
}
