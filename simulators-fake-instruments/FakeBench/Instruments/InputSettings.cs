namespace FakeBench.Instruments;

/// <summary>How one input of the scope is set.</summary>
/// <param name="Span">From rail to rail, V or A.</param>
/// <param name="Offset">Value at the middle, V or A.</param>
public sealed record InputSettings(double Span, double Offset);
