using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Validity;

/// <summary>The last place where the envelope is held: what a train really put on the device.</summary>
/// <remarks>
/// Not a criterion of validity: it selects no capture, it ends the run. A part that is open or a loop that is longer
/// than stated drives the device into avalanche at every train, and a scope at its rail says at least so much.
/// </remarks>
public static class MeasuredEnvelope
{
    /// <summary>Which rating of the device a capture exceeded, in words; null where none.</summary>
    /// <param name="traces">The traces as recorded.</param>
    /// <param name="bench">The bench: stated gain and offset of each channel.</param>
    /// <param name="ratings">What the device may bear.</param>
    public static string? Exceeded(IReadOnlyList<RawTrace> traces, Bench bench, DeviceRatings ratings)
    {
        ArgumentNullException.ThrowIfNull(traces);
        ArgumentNullException.ThrowIfNull(bench);
        ArgumentNullException.ThrowIfNull(ratings);
        foreach (RawTrace trace in traces.Where(trace => trace.Codes.Length > 0))
        {
            (double rating, string name) = trace.Channel switch
            {
                Channel.VdsLow or Channel.VdsHigh => (ratings.BlockingVoltage, "blocking voltage"),
                Channel.IdLow or Channel.IdHigh => (ratings.PeakCurrent, "peak current"),
                _ => (double.PositiveInfinity, ""),
            };
            double peak = Peak(trace, bench.Channels.FirstOrDefault(channel => channel.Channel == trace.Channel));
            if (peak > rating)
            {
                string unit = trace.Channel.Unit();
                return $"{trace.Channel.Name()} reached {SiText.Format(peak, unit)}, above the device's rated "
                    + $"{name} of "
                    + SiText.Format(rating, unit);
            }
        }

        return null;
    }

    private static double Peak(RawTrace trace, ChannelSetup? setup)
    {
        short highest = trace.Codes[0];
        short lowest = highest;
        foreach (short code in trace.Codes)
        {
            highest = Math.Max(highest, code);
            lowest = Math.Min(lowest, code);
        }

        double offset = setup?.Offset ?? 0;
        double gain = setup?.Gain ?? 1;
        return Math.Max(
            Math.Abs((trace.Value(highest) - offset) / gain), Math.Abs((trace.Value(lowest) - offset) / gain));
    }
}
