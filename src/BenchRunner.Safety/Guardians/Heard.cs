namespace BenchRunner.Safety.Guardians;

/// <summary>What the guardian heard.</summary>
/// <param name="Kind">What it is.</param>
/// <param name="Commanded">Of a beat: the highest voltage that the supply was told since the bus was last proved down, V.</param>
/// <param name="Seen">Of a beat: the highest voltage that the voltmeter has shown since then, V.</param>
/// <param name="Believed">Of a beat: the voltmeter's last reading that could be believed, V; null: none since then.</param>
/// <param name="Text">What came, where it is no beat.</param>
public sealed record Heard(
    HeardKind Kind, double Commanded = 0, double Seen = 0, double? Believed = null, string Text = "")
{
    /// <summary>Of a beat: the voltmeter has shown what cannot be true, so its word that the bus is down proves
    /// nothing.</summary>
    public bool IsDoubted { get; init; }
}
