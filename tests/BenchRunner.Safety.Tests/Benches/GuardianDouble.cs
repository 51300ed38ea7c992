using BenchRunner.Safety.Guardians;

namespace BenchRunner.Safety.Tests.Benches;

/// <summary>A guardian that lives until a test says otherwise, and counts its beats.</summary>
internal sealed class GuardianDouble : IGuardian
{
    private int _polled;
    private int _makingSafe;

    public event Action<string>? Lost;

    public bool IsAlive { get; private set; } = true;

    public int Polled => Volatile.Read(ref _polled);

    public int MakingSafe => Volatile.Read(ref _makingSafe);

    public bool IsDone { get; private set; }

    public void Beat(BeatKind kind)
    {
        switch (kind)
        {
            case BeatKind.Polled:
                Interlocked.Increment(ref _polled);
                break;
            case BeatKind.MakingSafe:
                Interlocked.Increment(ref _makingSafe);
                break;
            default:
                IsDone = true;
                break;
        }
    }

    /// <summary>It dies; nobody is told yet.</summary>
    public void Die() => IsAlive = false;

    /// <summary>It dies, and its pipe says so.</summary>
    public void Lose(string why)
    {
        IsAlive = false;
        Lost?.Invoke(why);
    }
}
