using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Comparisons;

/// <summary>A measured waveform held against a reference.</summary>
/// <param name="Channels">Each channel that both have, in the order of <see cref="ChannelNames.All"/>.</param>
/// <param name="Headline">The channel whose errors stand for the whole, and that was aligned: the freewheeling
/// position's voltage, else the switch's, else the first; null where no channel is common.</param>
/// <param name="Window">The stretch compared; null where there is none.</param>
/// <param name="Shift">By how much the measured record is later than the reference, each on its own time axis, s; null
/// where they could not be aligned.</param>
/// <param name="Reason">Why there is no shift; null where there is one.</param>
/// <param name="Named">The quantities that were asked for, in that order.</param>
/// <param name="Others">The further quantities: the usual ones always, the rest where both have a value.</param>
public sealed record ComparisonResult(
    IReadOnlyList<ChannelComparison> Channels,
    Channel? Headline,
    ComparisonWindow? Window,
    double? Shift,
    string? Reason,
    IReadOnlyList<ScalarComparison> Named,
    IReadOnlyList<ScalarComparison> Others)
{
    /// <summary>The headline's errors; null where no channel is common.</summary>
    public ChannelComparison? Whole => Channels.FirstOrDefault(one => one.Channel == Headline);
}
