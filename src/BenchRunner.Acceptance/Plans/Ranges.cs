using System.Diagnostics;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Plans;

/// <summary>
/// Scope ranges from ratings, the point and the stated probe errors; never from what a capture measured.
/// </summary>
/// <remarks>
/// A range that a measurand could leave would select captures by it. So each has room for a recovery of three times the
/// usual charge, and how much of it must be used is asked of what bus and load current do, which the plan knows.
/// </remarks>
internal static class Ranges
{
    /// <summary>Ranges of all recorded channels at one point, by the scope's inputs.</summary>
    /// <param name="point">The operating point.</param>
    /// <param name="train">What its train does.</param>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    /// <param name="isProving">Whether it is the proving train below 60 V.</param>
    public static IReadOnlyList<PlannedRange> Of(
        OperatingPoint point, PulseTrain train, Sequence sequence, Bench bench, bool isProving)
    {
        bool firesHigh = HalfBridge.FiresHigh(sequence);
        var ranges = new List<PlannedRange>();
        foreach (ChannelSetup setup in bench.Channels.OrderBy(setup => setup.Input))
        {
            Channel part = HalfBridge.Playing(setup.Channel, firesHigh);
            (double low, double high) = Extent(part, point, train, sequence.Ratings, isProving);

            // The scope sees what the probe makes of it: recorded = gain · true + offset.
            double gain = Math.Abs(setup.Gain);
            double middle = (setup.Gain * (low + high) / 2) + (setup.Offset ?? 0);
            ranges.Add(new PlannedRange(setup.Channel, setup.Input, gain * (high - low), middle)
            {
                Swing = gain * Swing(part, point, train),
            });
        }

        return ranges;
    }

    /// <summary>
    /// Lowest and highest true value that must fit, with margin. The channel is named as if low fired.
    /// </summary>
    private static (double Low, double High) Extent(
        Channel part, OperatingPoint point, PulseTrain train, DeviceRatings ratings, bool isProving)
    {
        double swing = point.GateOn - point.GateOff;

        // Recovery and output charge add a current that hardly falls with the load's, and an overshoot that hardly
        // falls with the bus: each range has a part from the point and a part from the rating. At 48 V and a tenth of
        // the current a sound part reaches 2.7 times the bus and 5 times the load current, and the output charge is
        // most of it.
        double peak = isProving
            ? (5 * point.LoadCurrent) + (0.2 * ratings.PeakCurrent)
            : (1.5 * point.LoadCurrent) + (0.6 * ratings.PeakCurrent);
        double current = Math.Max(1.2 * train.Off2Current, Math.Min(1.05 * ratings.PeakCurrent, peak));

        // The freewheeling place rings higher than the firing one.
        double Voltage(double ofRating) => Math.Max(
            1.1 * train.Off2PeakVoltage,
            Math.Min(1.05 * ratings.BlockingVoltage, (2 * point.BusVoltage) + (ofRating * ratings.BlockingVoltage)));
        double switching = Voltage(0.05);
        double freewheeling = Voltage(0.1);
        double around = Math.Max(0.3 * point.BusVoltage, 0.05 * ratings.BlockingVoltage);
        double gate = (point.GateOn + point.GateOff) / 2;
        return part switch
        {
            Channel.VgsLow => (gate - swing, gate + swing),
            Channel.VgsHigh => (point.GateOff - (0.75 * swing), point.GateOff + (0.75 * swing)),
            Channel.VdsLow => (-0.1 * switching, switching),
            Channel.VdsHigh => (-0.1 * freewheeling, freewheeling),
            Channel.IdLow => (-0.3 * current, current),
            Channel.IdHigh => (-Math.Max(1.3 * train.Off2Current, 0.3 * current), current),
            Channel.ILoad => (-0.2 * train.Off2Current, 1.3 * train.Off2Current),
            Channel.Vbus => (point.BusVoltage - around, point.BusVoltage + around),
            _ => throw new UnreachableException(),
        };
    }

    /// <summary>
    /// How far bus, load current and gate alone move a channel, without recovery and ringing; 0 where they do not.
    /// </summary>
    private static double Swing(Channel part, OperatingPoint point, PulseTrain train) => part switch
    {
        Channel.VgsLow => point.GateOn - point.GateOff,
        Channel.VdsLow or Channel.VdsHigh => point.BusVoltage,
        Channel.IdLow or Channel.ILoad => train.Off2Current,
        Channel.IdHigh => train.OnCurrent,
        _ => 0,
    };
}
