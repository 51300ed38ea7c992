using BenchRunner.Acceptance.Benches;
using BenchRunner.Runner.Guarding;
using BenchRunner.Safety.Guardians;
using BenchRunner.Safety.Watches;

namespace BenchRunner.Soak.Mixes;

/// <summary>A guardian that lives and does nothing: a real one would end the process of the tests.</summary>
internal sealed class LivingGuardian : IRunGuardian
{
    public event Action<string>? Lost
    {
        add { }
        remove { }
    }

    public bool IsAlive { get; private set; }

    public static IRunGuardian Start(Bench bench, string log, TimeProvider time) => new LivingGuardian();

    public Task Begin(IReadOnlyDictionary<string, string>? links, CancellationToken cancel)
    {
        IsAlive = true;
        return Task.CompletedTask;
    }

    public void Follow(BusWitness witness)
    {
    }

    public void Beat(BeatKind kind)
    {
    }

    public ValueTask DisposeAsync() => ValueTask.CompletedTask;
}
