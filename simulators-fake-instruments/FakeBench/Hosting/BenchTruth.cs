namespace FakeBench.Hosting;

/// <summary>What no instrument says wrong: how the bench really is.</summary>
/// <param name="OutputsOff">Whether the supply's output is off and no trigger would fire the pulser.</param>
/// <param name="BankVoltage">Voltage of the bank, V.</param>
public readonly record struct BenchTruth(bool OutputsOff, double BankVoltage)
{
    /// <summary>Below this the bank counts as down, V.</summary>
    public const double Down = 60;

    /// <summary>Whether the bank is down.</summary>
    public bool IsDown => BankVoltage < Down;
}
