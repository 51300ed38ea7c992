using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Acceptance.Plans;

/// <summary>The train that shows, below 60 V, that bench and device are what the files say.</summary>
public static class ProvingTrain
{
    /// <summary>Its bus voltage, V.</summary>
    public const double BusVoltage = 48;

    /// <summary>Its load current over the lowest target current, 1.</summary>
    public const double CurrentShare = 0.1;

    /// <summary>The operating point of the proving trains of a sequence.</summary>
    /// <param name="sequence">The sequence; at least one operating point.</param>
    /// <returns>The point of lowest current at 48 V, a tenth of its current and ambient temperature.</returns>
    public static OperatingPoint Point(Sequence sequence)
    {
        ArgumentNullException.ThrowIfNull(sequence);
        OperatingPoint lowest = sequence.OperatingPoints.MinBy(point => point.LoadCurrent)!;
        return lowest with
        {
            Name = UncountedPoints.ProvingBefore,
            BusVoltage = Math.Min(BusVoltage, lowest.BusVoltage),
            LoadCurrent = CurrentShare * lowest.LoadCurrent,
            Temperature = null,
            ElseSkipHigher = false,
        };
    }
}
