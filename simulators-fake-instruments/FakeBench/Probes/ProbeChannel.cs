using FakeBench.Physics;

namespace FakeBench.Probes;

/// <summary>What lies between one signal and the scope's input: a probe with its faults.</summary>
/// <remarks>recorded(t) = gain · lowpass(signal + lead · dsignal/dt)(t - skew) + offset + noise.</remarks>
/// <param name="Signal">What it is connected to.</param>
public sealed record ProbeChannel(Signal Signal)
{
    /// <summary>Recorded over true, 1.</summary>
    public double Gain { get; init; } = 1;

    /// <summary>Recorded when the true value is 0, V or A.</summary>
    public double Offset { get; init; }

    /// <summary>How much later the channel records than it happens, s.</summary>
    public double Skew { get; init; }

    /// <summary>Time constant L/R of a shunt, which shows R i + L di/dt, s; 0 for every other probe.</summary>
    public double Lead { get; init; }

    /// <summary>Corner frequency of its single pole, Hz; infinite for none.</summary>
    public double Bandwidth { get; init; } = double.PositiveInfinity;

    /// <summary>Root mean square of its noise, V or A as recorded.</summary>
    public double Noise { get; init; }
}
