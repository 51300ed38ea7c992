using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Signals.Analysis;

/// <summary>A waveform as the definitions see it: the low switch fires, every sample is finite, steps are
/// known.</summary>
/// <remarks>With the device in position high, low and high channels change places here and nowhere else.</remarks>
internal sealed class Record
{
    private readonly Waveform _waveform;
    private readonly bool _mirrored;
    private readonly Clipping _clipping;

    public Record(Waveform corrected, Clipping clipping, AnalysisSettings settings)
    {
        _waveform = corrected;
        _clipping = clipping;
        _mirrored = settings.Position == DevicePosition.High;
    }

    /// <summary>Samples a channel.</summary>
    public int Count => _waveform.Count;

    /// <summary>The last position inside the record, in samples.</summary>
    public double Last => _waveform.Count - 1;

    /// <summary>Sample interval, s.</summary>
    public double SampleInterval => _waveform.SampleInterval;

    /// <summary>The samples of a channel in the roles of a firing low switch; none where it is not measured.</summary>
    public Samples this[Channel role] =>
        _waveform.Has(Measured(role)) ? _waveform.At(Measured(role)).All : default;

    /// <summary>Whether the channel of a role is measured.</summary>
    public bool Has(Channel role) => _waveform.Has(Measured(role));

    /// <summary>The channel that is measured in a role.</summary>
    public Channel Measured(Channel role) => _mirrored ? Mirror(role) : role;

    /// <summary>Time of a position, s.</summary>
    public double TimeAt(double position) => _waveform.TimeAt(position);

    /// <summary>Smallest step of a role's channel, V or A.</summary>
    public double Step(Channel role) => _clipping.Step(Measured(role));

    /// <summary>Whether an interval of a role's channel holds a sample that was not finite.</summary>
    public bool IsClipped(Channel role, double from, double to) =>
        _clipping.Holds(Measured(role), from, to);

    /// <summary>A reading of a role's channel; the reason instead where its interval holds a sample that was not
    /// finite. For what other quantities rest on: they would pass a bridged value on.</summary>
    public Reading Unclipped(Channel role, Reading reading) =>
        reading.HasValue && IsClipped(role, reading.From, reading.To)
            ? Reading.None($"{Measured(role).Name()} is clipped")
            : reading;

    private static Channel Mirror(Channel role) => role switch
    {
        Channel.VgsLow => Channel.VgsHigh,
        Channel.VdsLow => Channel.VdsHigh,
        Channel.IdLow => Channel.IdHigh,
        Channel.VgsHigh => Channel.VgsLow,
        Channel.VdsHigh => Channel.VdsLow,
        Channel.IdHigh => Channel.IdLow,
        _ => role,
    };
}
