namespace FakeBench.Physics;

/// <summary>One pulse train as the driver gives it; time 0 is the start of its first rising edge (on1).</summary>
/// <param name="FirstPulse">Width of the first pulse, s: on1 to off1.</param>
/// <param name="Gap">Between the pulses, s: off1 to on2.</param>
/// <param name="SecondPulse">Width of the second pulse, s: on2 to off2.</param>
/// <param name="GateOn">Driver voltage in the on state, V.</param>
/// <param name="GateOff">Driver voltage in the off state, V; of both places unless <see cref="HeldOff"/> says
/// otherwise.</param>
/// <param name="BusVoltage">Voltage of the bank at rest before on1, V.</param>
public sealed record PulseTrain(
    double FirstPulse,
    double Gap,
    double SecondPulse,
    double GateOn,
    double GateOff,
    double BusVoltage)
{
    private readonly double? _heldOff;

    /// <summary>Driver voltage of the place that is held off, V.</summary>
    public double HeldOff
    {
        get => _heldOff ?? GateOff;
        init => _heldOff = value;
    }

    /// <summary>Start of the first falling edge, s.</summary>
    public double Off1 => FirstPulse;

    /// <summary>Start of the second rising edge, s.</summary>
    public double On2 => FirstPulse + Gap;

    /// <summary>Start of the second falling edge, s.</summary>
    public double Off2 => FirstPulse + Gap + SecondPulse;
}
