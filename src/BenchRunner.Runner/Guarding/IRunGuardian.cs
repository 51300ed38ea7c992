using BenchRunner.Safety.Guardians;
using BenchRunner.Safety.Watches;

namespace BenchRunner.Runner.Guarding;

/// <summary>The guardian of one run, from its start to its end.</summary>
/// <remarks>Disposing lets it go: at once where nothing was energised or the bus is proved down; otherwise it goes on by
/// itself, and does not hold up the run's end.</remarks>
public interface IRunGuardian : IGuardian, IAsyncDisposable
{
    /// <summary>Tells it where the instruments are, and waits until it has opened its own links and is ready.</summary>
    /// <param name="links">Role to link where they stand in for those of the bench file; null: none do.</param>
    /// <param name="cancel">Ends the waiting.</param>
    /// <exception cref="Benches.BenchException">It could not, or was not ready in time; nothing was energised.</exception>
    Task Begin(IReadOnlyDictionary<string, string>? links, CancellationToken cancel);

    /// <summary>From now on each beat says what the voltmeter has shown so far.</summary>
    void Follow(BusWitness witness);
}
