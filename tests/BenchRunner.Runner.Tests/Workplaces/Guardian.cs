using BenchRunner.Safety.Guardians;

namespace BenchRunner.Runner.Tests.Workplaces;

/// <summary>A guardian that lives as long as its test.</summary>
internal sealed class Guardian : IGuardian
{
    public event Action<string>? Lost
    {
        add
        {
            // It is not lost.
        }

        remove
        {
            // Nobody was kept.
        }
    }

    public bool IsAlive => true;

    public void Beat(BeatKind kind)
    {
        // It acts on nothing.
    }
}
