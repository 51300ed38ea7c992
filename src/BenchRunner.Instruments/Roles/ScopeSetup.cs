namespace BenchRunner.Instruments.Roles;

/// <summary>The settings that make a scope ready for one operating point, as its dialect says them.</summary>
internal static class ScopeSetup
{
    /// <summary>Contract of <see cref="IScope.Configure"/>: how far a read-back may lie from what was set.</summary>
    public const double Tolerance = 0.01;

    /// <summary>Every setting, in the order in which they are sent: an attenuation moves the range that follows
    /// it.</summary>
    /// <exception cref="ArgumentException">The trigger's channel is not recorded.</exception>
    public static List<ScopeSetting> Wanted(Instrument instrument, ScopeSettings settings)
    {
        var trigger = settings.Channels.FirstOrDefault(c => c.Channel == settings.TriggerOn)
            ?? throw new ArgumentException("the trigger's channel is not recorded", nameof(settings));
        var (interval, pretrigger) = (settings.Interval.Value, settings.Pretrigger.Value);
        List<ScopeSetting> wanted =
        [
            Words("set-format", "read-format"),
            Words("set-byte-order", "read-byte-order"),
            Number("set-interval", "read-interval", interval, interval * Tolerance),
            Number("set-points", "read-points", settings.Points, 0),
            Number("set-pretrigger", "read-pretrigger", pretrigger, (pretrigger * Tolerance) + interval),
        ];
        foreach (var c in settings.Channels)
        {
            if (Attenuation(instrument, c) is { } attenuation)
            {
                wanted.Add(attenuation);
            }

            wanted.Add(Number("set-range", "read-range", c.Span, c.Span * Tolerance, c.Input));
            wanted.Add(Number("set-offset", "read-offset", c.Offset, c.Span * Tolerance, c.Input));
        }

        wanted.Add(Words("set-trigger-source", "read-trigger-source", trigger.Input));
        wanted.Add(Number("set-trigger-level", "read-trigger-level", settings.TriggerLevel, trigger.Span * Tolerance));
        wanted.Add(Words("set-trigger-slope", null));
        return wanted;

        ScopeSetting Number(string set, string read, double value, double tolerance, int? channel = null) =>
            ScopeSetup.Number(instrument, set, read, value, tolerance, channel);

        ScopeSetting Words(string set, string? read, int? channel = null) => ScopeSetting.Words(
            instrument.Command(set, channel: channel), read is null ? null : instrument.Command(read));
    }

    /// <summary>The attenuation of a channel's probe; null where none is stated.</summary>
    public static ScopeSetting? Attenuation(Instrument instrument, ScopeChannelSettings channel) =>
        channel.Attenuation is { } value
            ? Number(
                instrument, "set-attenuation", "read-attenuation", value, value * Tolerance, channel.Input)
            : null;

    private static ScopeSetting Number(
        Instrument instrument, string set, string read, double value, double tolerance, int? channel) =>
        ScopeSetting.Number(
            instrument.Command(set, value, channel), instrument.Command(read, channel: channel), value, tolerance);
}
