using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Plans;

/// <summary>The scope range of one channel, planned from ratings and expectations, never from a measurand.</summary>
/// <param name="Channel">The channel.</param>
/// <param name="Input">The scope's channel number.</param>
/// <param name="Span">Whole range from rail to rail, V or A.</param>
/// <param name="Offset">Value at the middle of the range, V or A.</param>
public sealed record PlannedRange(Channel Channel, int Input, double Span, double Offset)
{
    private const double Step = 2;

    /// <summary>
    /// How far bus, load current and gate alone move the channel by the plan, V or A as recorded; 0: they do not.
    /// </summary>
    public double Swing { get; init; }

    /// <summary>The next range after a capture that clipped or used too little of this one.</summary>
    /// <param name="wider">Whether twice the span is wanted; false: half of it.</param>
    /// <returns>The range scaled about zero where zero lies inside it, else about its middle.</returns>
    public PlannedRange Next(bool wider)
    {
        double factor = wider ? Step : 1 / Step;
        bool holdsZero = Math.Abs(Offset) < Span / 2;
        return this with { Span = Span * factor, Offset = holdsZero ? Offset * factor : Offset };
    }
}
