using BenchRunner.Acceptance.Plans;
using BenchRunner.Files;
using BenchRunner.Signals.Analysis;
using BenchRunner.Signals.Quantities;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Plots;

/// <summary>A stretch of a waveform that is drawn, with the quantities that are shown in it.</summary>
/// <param name="Name">What it shows: <c>whole record</c>, <c>turn-off</c>, <c>turn-on</c>.</param>
/// <param name="Start">Start, s.</param>
/// <param name="End">End, s.</param>
/// <param name="Intervals">Quantities whose interval is shaded.</param>
/// <param name="Peaks">Quantities whose value is marked on the trace.</param>
internal sealed record View(
    string Name, double Start, double End, IReadOnlyList<QuantityValue> Intervals, IReadOnlyList<QuantityValue> Peaks)
{
    /// <summary>How many times as long as the switching the ringing behind it may make a view.</summary>
    private const double MostRinging = 8;

    /// <summary>What is seen around an edge of which nothing could be formed, s.</summary>
    private const double Around = 300e-9;

    private static readonly string[] _offSwitching = ["eoff"];
    private static readonly string[] _offRinging = ["ring_frequency_off"];
    private static readonly string[] _onSwitching = ["eon", "trr", "qrr"];
    private static readonly string[] _onRinging = ["ring_frequency"];

    /// <summary>The whole record.</summary>
    public static View Whole(AnalysedFile file) =>
        new("whole record", file.Waveform.TimeAt(0), file.Waveform.TimeAt(file.Waveform.Count - 1), [], []);

    /// <summary>The first turn-off; null where it is outside the record.</summary>
    public static View? TurnOff(AnalysedFile file) => file.Result.Train.Off1 is { } off1
        ? Edge("turn-off (off1)", file, off1, file.Result.Train.On2?.Departure, _offSwitching, _offRinging,
            ["vds_peak_off"])
        : null;

    /// <summary>The second turn-on; null where it is outside the record.</summary>
    public static View? TurnOn(AnalysedFile file) => file.Result.Train.On2 is { } on2
        ? Edge("turn-on (on2)", file, on2, file.Result.Train.Off2?.Departure, _onSwitching, _onRinging,
            ["id_peak_on", "vds_high_peak_1"])
        : null;

    /// <summary>The channels that a quantity rests on, as they are measured.</summary>
    public static IEnumerable<Channel> Channels(QuantityValue value, AnalysisSettings settings)
    {
        bool mirrored = settings.Position == DevicePosition.High;
        bool byLine = value.Definition.EndsWith(DefinitionId.LoadLineRoute, StringComparison.Ordinal);
        IReadOnlyList<Channel> roles =
            QuantityCatalogue.Find(value.Quantity)?.Find(value.Definition)?.Channels ?? [];
        // The gate only says where to look.
        return roles.Where(role => role is not (Channel.VgsLow or Channel.VgsHigh))
            .Select(role => byLine && role == Channel.IdHigh ? Channel.IdLow : role)
            .Select(role => HalfBridge.Playing(role, mirrored));
    }

    private static View Edge(
        string name, AnalysedFile file, PulseEdge edge, double? next, string[] switching, string[] ringing,
        string[] peaks)
    {
        QuantityValue[] short_ = First(file, switching), long_ = First(file, ringing);
        double start = short_.Select(value => value.From!.Value).Append(edge.Departure).Min();
        double end = short_.Select(value => value.To!.Value).Append(edge.At).Max();
        end = short_.Length == 0 ? end + Around : end;
        double length = end - start;
        foreach (QuantityValue ring in long_)
        {
            end = Math.Max(end, Math.Min(ring.To!.Value, start + (MostRinging * length)));
        }

        double margin = 0.15 * (end - start);
        (double first, double last) = (file.Waveform.TimeAt(0), file.Waveform.TimeAt(file.Waveform.Count - 1));
        start = Math.Max(first, start - margin);
        end = Math.Min(Math.Min(last, Math.Max(end, next ?? last)), end + margin);
        return new View(
            name, start, end > start ? end : last, [.. short_, .. long_.Where(ring => ring.From < end)],
            First(file, peaks));
    }

    /// <summary>Of each quantity the first value that there is.</summary>
    private static QuantityValue[] First(AnalysedFile file, string[] names) =>
    [
        .. names.Select(name => file.Result.Quantities.FirstOrDefault(
            value => value.Quantity == name && value is { Value: not null, From: not null, To: not null }))
            .OfType<QuantityValue>(),
    ];
}
