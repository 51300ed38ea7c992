namespace BenchRunner.Signals.Edges;

/// <summary>Which way a signal goes through a level.</summary>
public enum CrossingDirection
{
    /// <summary>Upwards.</summary>
    Rising,

    /// <summary>Downwards.</summary>
    Falling,
}
