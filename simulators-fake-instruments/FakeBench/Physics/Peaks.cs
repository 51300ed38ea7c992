namespace FakeBench.Physics;

/// <summary>Largest values that the solver has met.</summary>
internal sealed class Peaks
{
    public Peaks(ReadOnlySpan<double> state) => Note(state);

    public double LowCurrent { get; private set; } = double.NegativeInfinity;

    public double LowVoltage { get; private set; } = double.NegativeInfinity;

    public double HighVoltage { get; private set; } = double.NegativeInfinity;

    public void Note(ReadOnlySpan<double> state)
    {
        LowCurrent = Math.Max(LowCurrent, state[BridgeState.Low]);
        LowVoltage = Math.Max(LowVoltage, state[BridgeState.VLow]);
        HighVoltage = Math.Max(HighVoltage, state[BridgeState.VHigh]);
    }
}
