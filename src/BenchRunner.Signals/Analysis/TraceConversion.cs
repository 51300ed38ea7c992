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
    public static Waveform ToWaveform(IReadOnlyList<RawTrace> traces)
    {
        ArgumentNullException.ThrowIfNull(traces);
        if (traces.Count == 0)
        {
            throw new ArgumentException("A capture has at least one trace.", nameof(traces));
        }

        RawTrace first = traces[0];
        Dictionary<Channel, double[]> channels = new(traces.Count);
        Dictionary<Channel, double> steps = new(traces.Count);
        foreach (RawTrace trace in traces)
        {
            if (trace.SampleInterval != first.SampleInterval || trace.TimeOrigin != first.TimeOrigin)
            {
                throw new ArgumentException(
                    $"{trace.Channel.Name()} has another time base than {first.Channel.Name()}.", nameof(traces));
            }

            if (!channels.TryAdd(trace.Channel, Values(trace)))
            {
                throw new ArgumentException($"{trace.Channel.Name()} is given twice.", nameof(traces));
            }

            steps[trace.Channel] = Math.Abs(trace.Increment) * SmallestStep.OfCodes(trace.Codes);
        }

        return new Waveform(first.TimeOrigin, first.SampleInterval, channels, steps);
    }

    private static double[] Values(RawTrace trace)
    {
        double[] values = GC.AllocateUninitializedArray<double>(trace.Codes.Length);
        short[] codes = trace.Codes;
        (double reference, double increment, double origin) = (trace.Reference, trace.Increment, trace.Origin);
        for (int i = 0; i < codes.Length && i < values.Length; i++)
        {
            values[i] = ((codes[i] - reference) * increment) + origin;
        }

        return values;
    }
}
