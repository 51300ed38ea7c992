using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Acceptance.Plans;

/// <summary>What a run of one device costs: time and bytes of evidence.</summary>
internal static class RunCost
{
    /// <summary>Bytes of one stored sample: ADC codes are kept as 16 bits.</summary>
    private const int BytesPerSample = 2;

    /// <summary>Captures of the bench itself: the zero capture and up to three proving trains before and
    /// after.</summary>
    private const int OwnCaptures = 7;

    /// <summary>Time that one device needs without retries, s; soaks count, the heating before them is not known.</summary>
    /// <param name="points">The points in the order in which they are run.</param>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    public static double Duration(IReadOnlyList<PlannedPoint> points, Sequence sequence, Bench bench)
    {
        double bus = ProvingTrain.BusVoltage;
        double? plate = null;
        double time = Change(0, bus, bench);
        foreach (PlannedPoint planned in points)
        {
            time += Change(bus, planned.Point.BusVoltage, bench);
            time += planned.Point.Temperature is { } hot && hot != plate ? sequence.Soak : 0;
            plate = planned.Point.Temperature;
            time += sequence.ValidCaptures * Math.Max(planned.Point.RepeatEvery, planned.Recovery);
            bus = planned.Point.BusVoltage;
        }

        return time + Change(bus, ProvingTrain.BusVoltage, bench);
    }

    /// <summary>Bytes of evidence that one device needs when every point takes all its captures.</summary>
    /// <param name="points">The points.</param>
    /// <param name="sequence">The sequence.</param>
    /// <param name="bench">The bench.</param>
    public static long Bytes(IReadOnlyList<PlannedPoint> points, Sequence sequence, Bench bench)
    {
        long samples = 0;
        long largest = 0;
        foreach (PlannedPoint planned in points)
        {
            samples += (long)planned.Samples * sequence.CapturesAtMost;
            largest = Math.Max(largest, planned.Samples);
        }

        return (samples + (OwnCaptures * largest)) * bench.Channels.Count * BytesPerSample;
    }

    /// <summary>
    /// Time of a change of the bus, s: up at the supply's current limit, C ΔV/I; down through the bleeder.
    /// </summary>
    private static double Change(double from, double to, Bench bench) => to >= from
        ? bench.BusCapacitance * (to - from) / bench.ChargingCurrent
        : bench.Bleeder * bench.BusCapacitance * Math.Log(from / to);
}
