namespace BenchRunner.Runner.Points;

/// <summary>The bus did not come up, or not to where it was set.</summary>
/// <param name="message">What was seen.</param>
/// <param name="stuckInLimit">Whether it stays down in current limit with both gates off: the device, where it fills
/// both places.</param>
public sealed class BusException(string message, bool stuckInLimit) : Exception(message)
{
    /// <summary>Whether the bus stays down in current limit with both gates off.</summary>
    public bool StuckInLimit { get; } = stuckInLimit;
}
