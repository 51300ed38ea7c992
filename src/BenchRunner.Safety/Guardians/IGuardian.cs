namespace BenchRunner.Safety.Guardians;

/// <summary>The guardian as the runner sees it: a second process that ends the runner and makes the bench safe when heartbeats
/// stay away.</summary>
/// <remarks>Without a living guardian nothing is energised: <c>SafetySupervisor</c> grants no permit, and its loss is a trip.</remarks>
public interface IGuardian
{
    /// <summary>Whether it said that it is ready and has not been lost since.</summary>
    bool IsAlive { get; }

    /// <summary>Raised once, with the reason, when it is lost before it was told <see cref="BeatKind.Done"/>; to whoever
    /// subscribes after that too, at once.</summary>
    event Action<string>? Lost;

    /// <summary>Tells it how the run stands. Never blocks and never throws; a beat that cannot be delivered is a loss.</summary>
    void Beat(BeatKind kind);
}
