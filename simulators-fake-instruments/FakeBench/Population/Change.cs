using System.Globalization;

namespace FakeBench.Population;

/// <summary>One parameter of the circuit times a factor: defects are made of nothing else.</summary>
/// <param name="Parameter">Where it is and which: <c>low.</c> or <c>high.</c> and a parameter of that place,
/// <c>bench.</c> and one of the bench, <c>probe.CHANNEL.</c> and one of that probe.</param>
/// <param name="Factor">What it is multiplied by, 1; not below 0.</param>
/// <param name="FromVolts">Bus voltage from which on it is there, V; for probes only.</param>
public sealed record Change(string Parameter, double Factor, double FromVolts = 0)
{
    /// <summary>Parameter and factor, e.g. <c>high.lifetime x1.5</c>.</summary>
    public override string ToString() => string.Create(
        CultureInfo.InvariantCulture,
        $"{Parameter} x{Factor:0.#####}{(FromVolts > 0 ? $" from {FromVolts} V on" : "")}");
}
