using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Plans;

/// <summary>The scope range of one channel, planned from ratings and expectations, never from a measurand.</summary>
/// <param name="Channel">The channel.</param>
/// <param name="Input">The scope's channel number.</param>
/// <param name="Span">Whole range from rail to rail, V or A.</param>
/// <param name="Offset">Value at the middle of the range, V or A.</param>
public sealed record PlannedRange(Channel Channel, int Input, double Span, double Offset);
