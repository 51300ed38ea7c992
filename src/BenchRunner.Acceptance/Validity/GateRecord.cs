using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Validity;

/// <summary>A gate's record on its time base, with its stated error undone as it is read.</summary>
internal sealed class GateRecord
{
    private readonly Func<int, double> _recorded;
    private readonly int _count;
    private readonly double _origin;
    private readonly double _interval;
    private readonly ChannelCorrection _error;

    private GateRecord(Func<int, double> recorded, int count, double origin, double interval, ChannelCorrection? error)
    {
        _recorded = recorded;
        _count = count;
        _origin = origin;
        _interval = interval;
        _error = error ?? new ChannelCorrection();
    }

    /// <summary>Of a raw trace; null where there is none.</summary>
    public static GateRecord? Of(RawTrace? trace, ChannelCorrection? error) => trace is null ? null : new GateRecord(
        i => trace.Value(trace.Codes[i]), trace.Codes.Length, trace.TimeOrigin, trace.SampleInterval, error);

    /// <summary>Of a waveform's channel; null where it has none.</summary>
    public static GateRecord? Of(Waveform waveform, Channel channel, ChannelCorrection? error) => !waveform.Has(channel)
        ? null
        : new GateRecord(
            i => waveform[channel][i], waveform.Count, waveform.TimeOrigin, waveform.SampleInterval, error);

    /// <summary>The highest true value between two times, V, and when it is, s.</summary>
    /// <remarks>Samples that are not finite are left out; none in between gives negative infinity.</remarks>
    public (double Value, double At) Highest(double from, double to)
    {
        double highest = double.NegativeInfinity;
        double when = from;
        int last = (int)Math.Min(_count - 1, Math.Floor((to + _error.Skew - _origin) / _interval));
        for (int i = (int)Math.Max(0, Math.Ceiling((from + _error.Skew - _origin) / _interval)); i <= last; i++)
        {
            double value = (_recorded(i) - (_error.Offset ?? 0)) / _error.Gain;
            if (double.IsFinite(value) && value > highest)
            {
                highest = value;
                when = _origin + (i * _interval) - _error.Skew;
            }
        }

        return (highest, when);
    }
}
