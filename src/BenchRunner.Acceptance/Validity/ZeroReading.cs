using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Validity;

/// <summary>What the zero capture says: the means of a record in which no train was fired.</summary>
/// <remarks>
/// Taken with the bus down, it gives the offsets of the voltage probes whose offset the bench file does not state. The
/// gates are at their off bias in it, so it says nothing about theirs; currents have their own zero before each train,
/// which is held against this one (<c>baseline</c>).
/// </remarks>
public sealed class ZeroReading
{
    private readonly Dictionary<Channel, double> _offsets = [];
    private readonly Dictionary<Channel, double> _residuals = [];

    private ZeroReading()
    {
    }

    /// <summary>Reads a zero capture.</summary>
    /// <param name="traces">Its traces as recorded.</param>
    /// <param name="bench">The bench: stated gain and offset of each channel.</param>
    /// <param name="sequence">The sequence: which place blocks while both gates are off.</param>
    /// <param name="bank">The voltmeter's reading of the bank meanwhile, V: what a probe across it sees rightly.</param>
    public static ZeroReading Of(IReadOnlyList<RawTrace> traces, Bench bench, Sequence sequence, double bank)
    {
        ArgumentNullException.ThrowIfNull(traces);
        ArgumentNullException.ThrowIfNull(bench);
        Channel blocking = HalfBridge.Playing(Channel.VdsLow, HalfBridge.FiresHigh(sequence));
        var zero = new ZeroReading();
        foreach (RawTrace trace in traces.Where(trace => trace.Codes.Length > 0))
        {
            ChannelSetup? setup = bench.Channels.FirstOrDefault(one => one.Channel == trace.Channel);
            double gain = setup?.Gain ?? 1;
            double seen = trace.Channel == Channel.Vbus || trace.Channel == blocking ? bank : 0;
            double offset = Mean(trace) - (gain * seen);
            bool found = setup?.Offset is null && IsVoltage(trace.Channel);
            if (found)
            {
                zero._offsets[trace.Channel] = offset;
            }

            zero._residuals[trace.Channel] = found ? 0 : (offset - (setup?.Offset ?? 0)) / gain;
        }

        return zero;
    }

    /// <summary>The same, with the currents of a later zero capture: their probes drift, the others' offsets
    /// stay.</summary>
    /// <param name="later">Taken with both gates off; the bus may be up.</param>
    public ZeroReading WithCurrentsOf(ZeroReading later)
    {
        ArgumentNullException.ThrowIfNull(later);
        var zero = new ZeroReading();
        foreach ((Channel channel, double offset) in _offsets)
        {
            zero._offsets[channel] = offset;
        }

        foreach ((Channel channel, double residual) in _residuals)
        {
            zero._residuals[channel] = channel.Unit() == "A" ? later.Residual(channel) ?? residual : residual;
        }

        return zero;
    }

    /// <summary>What the analysis takes as given, with the offsets that the zero capture found.</summary>
    /// <param name="settings">The settings without them.</param>
    public AnalysisSettings ApplyTo(AnalysisSettings settings)
    {
        ArgumentNullException.ThrowIfNull(settings);
        var corrections = new Dictionary<Channel, ChannelCorrection>(settings.Corrections);
        foreach ((Channel channel, double offset) in _offsets)
        {
            corrections[channel] = corrections.GetValueOrDefault(channel, new ChannelCorrection())
                with
            { Offset = offset };
        }

        return settings with { Corrections = corrections };
    }

    /// <summary>What a channel still shows at zero after its correction, V or A; null where it was not
    /// recorded.</summary>
    /// <param name="channel">The channel.</param>
    public double? Residual(Channel channel) =>
        _residuals.TryGetValue(channel, out double residual) ? residual : null;

    private static bool IsVoltage(Channel channel) =>
        channel is Channel.VdsLow or Channel.VdsHigh or Channel.Vbus;

    private static double Mean(RawTrace trace)
    {
        // Whole numbers: the sum is exact, so its order cannot matter.
        long sum = 0;
        foreach (short code in trace.Codes)
        {
            sum += code;
        }

        double mean = sum / (double)trace.Codes.Length;
        return ((mean - trace.Reference) * trace.Increment) + trace.Origin;
    }
}
