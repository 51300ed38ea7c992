namespace BenchRunner.Safety.Guardians;

/// <summary>The second process that ends the run and makes the bench safe when the run dies or hangs, as the run sees
/// it.</summary>
/// <remarks>It acts on end of input, on a beat that is none, and on silence: so whoever beats must be what watches the
/// bench, never a timer of its own.</remarks>
public interface IGuardian
{
    /// <summary>Whether it lives and listens: nothing is energised without it.</summary>
    bool IsAlive { get; }

    /// <summary>Raised once when it is lost, with the reason. From any thread; a handler must not throw.</summary>
    event Action<string>? Lost;

    /// <summary>Sends one beat. Never blocks and never throws: a beat that cannot be sent is a lost guardian.</summary>
    void Beat(BeatKind kind);
}
