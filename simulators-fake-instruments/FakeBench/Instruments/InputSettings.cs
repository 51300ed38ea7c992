namespace FakeBench.Instruments;

/// <summary>How one input of the scope is set.</summary>
/// <param name="Span">From rail to rail, V or A as shown.</param>
/// <param name="Offset">Value at the middle, V or A as shown.</param>
/// <param name="Attenuation">What the scope was told of the probe, 1.</param>
public sealed record InputSettings(double Span, double Offset, double Attenuation);
