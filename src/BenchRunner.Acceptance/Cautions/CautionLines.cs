using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;

namespace BenchRunner.Acceptance.Cautions;

/// <summary>What a person must read before the bench is energised above 60 V DC.</summary>
public static class CautionLines
{
    /// <summary>Plate temperature from which it is called hot, degC.</summary>
    public const double HotFrom = 60;

    /// <summary>The cautions of a plan, with its values, and the lab's own lines.</summary>
    /// <param name="plan">The plan.</param>
    /// <param name="bench">The bench.</param>
    /// <returns>One line each.</returns>
    public static IReadOnlyList<string> Of(Plan plan, Bench bench)
    {
        ArgumentNullException.ThrowIfNull(plan);
        ArgumentNullException.ThrowIfNull(bench);
        double bus = plan.Points.Max(point => point.Point.BusVoltage);
        double peak = plan.Points.Max(point => point.Off2PeakVoltage);
        double energy = plan.Points.Max(point => point.StoredEnergy);
        double load = plan.Points.Max(point => point.LoadEnergy);
        double current = plan.Points.Max(point => point.Off2Current);
        double plate = plan.Points.Max(point => point.Point.Temperature ?? bench.Ambient);
        return
        [
            $"Up to {SiText.Format(bus, "V")} DC on the fixture, {SiText.Format(peak, "V", 3)} at its peaks: "
            + "it can kill.",
            $"Up to {SiText.Format(energy, "J", 3)} in the bank and {SiText.Format(load, "J", 3)} in the inductor, "
            + $"{SiText.Format(current, "A", 3)} through the device: a part can burst and throw fragments.",
            plate >= HotFrom
                ? $"The plate is at up to {SiText.Format(plate, "degC")}: hot. It stays hot after the run."
                : $"The plate is at about {SiText.Format(plate, "degC")}; it and the device may be hot after a fault.",
            "The enclosure is closed and nobody is inside; eye protection on; nobody works alone.",
            "The hardware emergency stop is within reach; enclosure interlock, fuse and bleeder are in order.",
            "This program is not a safety device. Local codes and trained people decide what may be done here.",
            .. bench.Cautions,
        ];
    }
}
