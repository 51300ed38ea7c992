using BenchRunner.Signals.Levels;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Analysis;

/// <summary>From the ADC codes of a capture to volts and amperes.</summary>
public static class TraceConversion
{
    /// <summary>Converts the traces of one capture.</summary>
    /// <param name="traces">One trace a channel, on one time base; at least one.</param>
    /// <returns>The waveform, uncorrected, with the step of each channel.</returns>
    /// <exception cref="ArgumentException">No trace, a channel twice, or traces of different length or time
    /// base.</exception>
    /// <remarks>value = (code − reference) · increment + origin. A code at a rail is converted like any other: whether
    /// a capture is clipped is a question to the codes, and validity asks it there.</remarks>
    public static Waveform ToWaveform(IReadOnlyList<RawTrace> traces) => ToWaveform(traces, buffers: null);

    /// <inheritdoc cref="ToWaveform(IReadOnlyList{RawTrace})"/>
    internal static Waveform ToWaveform(IReadOnlyList<RawTrace> traces, SampleBuffers? buffers)
    {
        ArgumentNullException.ThrowIfNull(traces);
        if (traces.Count == 0)
        {
            throw new ArgumentException("A capture has at least one trace.", nameof(traces));
        }

        RawTrace first = traces[0];
        Dictionary<Channel, ChannelSamples> channels = new(traces.Count);
        foreach (RawTrace trace in traces)
        {
            if (trace.SampleInterval != first.SampleInterval || trace.TimeOrigin != first.TimeOrigin
                || trace.Codes.Length != first.Codes.Length)
            {
                throw new ArgumentException(
                    $"{trace.Channel.Name()} has another time base than {first.Channel.Name()}.", nameof(traces));
            }

            double step = Math.Abs(trace.Increment) * SmallestStep.OfCodes(trace.Codes);
            double offset = trace.Origin - (trace.Reference * trace.Increment);
            ChannelSamples samples = ChannelSamples.Of(trace.Codes, trace.Increment, offset, step, buffers);
            if (!channels.TryAdd(trace.Channel, samples))
            {
                throw new ArgumentException($"{trace.Channel.Name()} is given twice.", nameof(traces));
            }
        }

        return new Waveform(
            first.TimeOrigin,
            first.SampleInterval,
            first.Codes.Length,
            channels.Select(channel => (channel.Key, channel.Value)));
    }
}
