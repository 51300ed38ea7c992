using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Corrections;

/// <summary>Undoes the stated errors of a recording, once and in one order: offset, gain, shunt, skew.</summary>
/// <remarks>
/// recorded(t) = gain · true(t − skew) + offset; a shunt's inductance adds L di/dt to what <c>id_low</c> records. A
/// current without a stated offset keeps it here: where its rest lies is known only after the edges are found.
/// </remarks>
public static class Correction
{
    /// <summary>Corrects a waveform.</summary>
    /// <param name="waveform">The record as it came; not modified.</param>
    /// <param name="settings">The stated errors of the channels, and the shunt.</param>
    /// <returns>The corrected waveform on the same time grid. A channel without anything to undo is shared,
    /// and with nothing to undo at all the result is <paramref name="waveform"/> itself. Steps are in corrected
    /// units.</returns>
    /// <exception cref="ArgumentException">A gain is 0 or not finite, an offset or skew not finite, the shunt's
    /// resistance not above 0 or its inductance negative.</exception>
    /// <remarks>
    /// A NaN or infinity stays where it is: the shunt's correction starts anew behind it, and the skew's interpolation
    /// spreads it over at most six samples. Positions that the skew moves beyond the record hold its end value.
    /// </remarks>
    /// <example>A record of 1.013 · true + 0.96 A, 4.6 ns late, has a gain of 1.013, an offset of 0.96 A, a skew of
    /// 4.6 ns.</example>
    public static Waveform Correct(Waveform waveform, AnalysisSettings settings)
    {
        ArgumentNullException.ThrowIfNull(waveform);
        ArgumentNullException.ThrowIfNull(settings);
        double inductive = TimeConstant(settings.Shunt);
        Dictionary<Channel, ChannelSamples> corrected = [];
        foreach (Channel channel in waveform.Channels)
        {
            ChannelCorrection stated = settings.Corrections.GetValueOrDefault(channel) ?? new ChannelCorrection();
            Check(channel, stated);
            double filter = channel == Channel.IdLow ? inductive : 0;
            ChannelSamples recorded = waveform.At(channel);
            ChannelSamples samples = Correct(recorded, waveform.SampleInterval, stated, filter);
            if (samples != recorded)
            {
                corrected[channel] = samples;
            }
        }

        return waveform.With(corrected);
    }

    /// <summary>Corrects one channel; the very same where there is nothing to undo.</summary>
    private static ChannelSamples Correct(
        ChannelSamples samples, double dt, ChannelCorrection stated, double filter)
    {
        if ((stated.Offset ?? 0) != 0 || stated.Gain != 1)
        {
            samples = samples.Undo(stated.Offset ?? 0, stated.Gain);
        }

        if (filter > 0)
        {
            samples = samples.Filtered((recorded, current) =>
            {
                recorded.CopyTo(current);
                ShuntCorrection.Apply(current, dt, filter);
            });
        }

        return stated.Skew == 0
            ? samples
            : samples.Filtered((recorded, moved) => SkewCorrection.Apply(recorded, stated.Skew / dt, moved));
    }

    private static double TimeConstant(Shunt? shunt)
    {
        if (shunt is null)
        {
            return 0;
        }

        double tau = shunt.Inductance / shunt.Resistance;
        return shunt.Resistance > 0 && shunt.Inductance >= 0 && double.IsFinite(tau)
            ? tau
            : throw new ArgumentException(
                $"The shunt has {shunt.Resistance} Ω and {shunt.Inductance} H; it needs a positive resistance and an "
                + "inductance of 0 or more.",
                nameof(shunt));
    }

    private static void Check(Channel channel, ChannelCorrection stated)
    {
        if (!double.IsFinite(stated.Gain) || stated.Gain == 0)
        {
            throw new ArgumentException($"{channel.Name()} has a gain of {stated.Gain}; it must be finite and not 0.");
        }

        if (!double.IsFinite(stated.Offset ?? 0) || !double.IsFinite(stated.Skew))
        {
            throw new ArgumentException(
                $"{channel.Name()} has an offset of {stated.Offset} and a skew of {stated.Skew} s; not finite.");
        }
    }
}
