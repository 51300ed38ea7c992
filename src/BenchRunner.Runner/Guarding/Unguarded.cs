using BenchRunner.Safety.Guardians;

namespace BenchRunner.Runner.Guarding;

/// <summary>Stands where the guardian's process belongs until a run starts one.</summary>
internal sealed class Unguarded : IGuardian
{
    public event Action<string>? Lost
    {
        add { }
        remove { }
    }

    public bool IsAlive => true;

    public void Beat(BeatKind kind)
    {
        // Nobody listens.
    }
}
