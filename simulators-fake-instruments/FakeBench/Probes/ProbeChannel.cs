using FakeBench.Physics;

namespace FakeBench.Probes;

/// <summary>What lies between one signal and the scope's input: a probe with its faults.</summary>
/// <remarks>recorded(t) = gain · lowpass(signal + lead · dsignal/dt)(t - skew) + offset + noise.</remarks>
/// <param name="Signal">What it is connected to.</param>
public sealed record ProbeChannel(Signal Signal)
{
    /// <summary>Recorded over true, 1.</summary>
    public double Gain { get; init; } = 1;

    /// <summary>By how much the probe divides: what the scope must be told, so that it shows the true value;
    /// 1 for a probe that does not.</summary>
    public double Attenuation { get; init; } = 1;

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

    /// <summary>The same probe on a scope that was told another attenuation: gain, offset and noise are shown
    /// larger or smaller with it.</summary>
    /// <param name="told">Attenuation that the scope was told, 1; above 0.</param>
    public ProbeChannel ShownBy(double told)
    {
        double factor = told / Attenuation;
        return this with { Gain = Gain * factor, Offset = Offset * factor, Noise = Noise * factor };
    }
}
