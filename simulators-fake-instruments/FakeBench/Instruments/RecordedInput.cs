using FakeBench.Probes;

namespace FakeBench.Instruments;

/// <summary>How one input records: probe, amplifier, memory.</summary>
/// <param name="Probe">What lies before it.</param>
/// <param name="Span">From rail to rail as the amplifier stands, V or A.</param>
/// <param name="Offset">Value at the middle, V or A.</param>
public sealed record RecordedInput(ProbeChannel Probe, double Span, double Offset)
{
    /// <summary>Samples that it keeps.</summary>
    public required int Points { get; init; }
}
