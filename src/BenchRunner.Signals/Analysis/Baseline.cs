using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Analysis;

/// <summary>The resting current, taken off every current whose offset is not stated.</summary>
/// <remarks>A current probe drifts by some tenths of an ampere; where the rest is read moves eoff by percents, so it is
/// recorded.</remarks>
internal static class Baseline
{
    // After off1 the current rings; a quarter of the gap later it is at rest.
    private const double GapPart = 0.25;

    /// <summary>Takes the rest off.</summary>
    /// <param name="corrected">The waveform after the stated corrections.</param>
    /// <param name="record">The same in roles.</param>
    /// <param name="train">Its edges.</param>
    /// <param name="settings">What is stated.</param>
    /// <param name="source">Where the offset of the switch's current came from.</param>
    /// <returns>The waveform with its currents at rest before the train.</returns>
    public static Waveform Remove(
        Waveform corrected, Record record, Train train, AnalysisSettings settings, out BaselineSource source)
    {
        (double from, double to, BaselineSource rest) = Rest(train);
        source = rest;
        Dictionary<Channel, ChannelSamples> rested = [];
        foreach (Channel channel in (ReadOnlySpan<Channel>)[Channel.IdLow, Channel.IdHigh, Channel.ILoad])
        {
            bool isSwitch = channel == record.Measured(Channel.IdLow);
            bool stated = settings.Corrections.TryGetValue(channel, out ChannelCorrection? c) && c.Offset is not null;
            // In the gap the load's current flows through the diode: only the switch rests there.
            if (corrected.Has(channel) && !stated && (rest == BaselineSource.BeforeOn1 || (isSwitch && to > from)))
            {
                ChannelSamples samples = corrected.At(channel);
                ChannelSamples less = samples.Undo(Integral.Mean(samples.All, from, to), gain: 1);
                if (less.HasCodes || Finite.All(less.Values))
                {
                    rested[channel] = less;
                }
                else if (isSwitch)
                {
                    // Beyond what a double holds: left as it was.
                    source = BaselineSource.None;
                }
            }

            source = isSwitch && stated ? BaselineSource.Stated : source;
        }

        return corrected.With(rested);
    }

    private static (double From, double To, BaselineSource Source) Rest(Train train) =>
        train.On1 is { Departure: >= 1 } on1 ? (0, on1.Departure, BaselineSource.BeforeOn1)
        : train.Off1 is { } off1 && train.On2 is { } on2 && on2.Departure > off1.At
            ? (off1.At + (GapPart * (on2.Departure - off1.At)), on2.Departure, BaselineSource.Gap)
            : (0, 0, BaselineSource.None);
}
