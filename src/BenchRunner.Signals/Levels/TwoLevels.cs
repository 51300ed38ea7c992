namespace BenchRunner.Signals.Levels;

/// <summary>The two states of a signal.</summary>
/// <param name="Low">Level of the low state, in the signal's unit.</param>
/// <param name="High">Level of the high state; above <paramref name="Low"/>.</param>
public readonly record struct TwoLevels(double Low, double High)
{
    /// <summary>From the low state to the high one.</summary>
    public double Swing => High - Low;

    /// <summary>The level a fraction of the swing above the low state.</summary>
    public double At(double fraction) => Low + (fraction * (High - Low));
}
