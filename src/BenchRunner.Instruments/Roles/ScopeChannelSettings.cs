using BenchRunner.Signals.Traces;

namespace BenchRunner.Instruments.Roles;

/// <summary>How one scope channel is set.</summary>
/// <param name="Channel">What it sees.</param>
/// <param name="Input">The scope's own channel number, from 1.</param>
/// <param name="Span">Whole range from rail to rail, V or A.</param>
/// <param name="Offset">Value at the middle of the range, V or A.</param>
/// <param name="Attenuation">Attenuation of the probe, which the scope is told and must say when asked back; 1; null:
/// not stated, neither set nor asked.</param>
public sealed record ScopeChannelSettings(
    Channel Channel, int Input, double Span, double Offset, double? Attenuation = null);
