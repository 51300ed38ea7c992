using BenchRunner.Instruments.Roles;

namespace BenchRunner.Safety.Supervision;

/// <summary>The interlock loop poll by poll, and the confirmation that is held to one closing of it.</summary>
/// <remarks>Its owner changes it under a lock; single values may be read beside it.</remarks>
internal sealed class LoopHold
{
    /// <summary>What the controller said last; null before the first poll.</summary>
    public InterlockState? Last { get; private set; }

    /// <summary>How often the loop was found open after it was closed, or at the first poll.</summary>
    public int Openings { get; private set; }

    /// <summary>Whether a confirmation is held: an open loop is a doubt, also while nothing is charged.</summary>
    public bool IsConfirmed { get; private set; }

    public void Saw(InterlockState interlock)
    {
        Openings += !interlock.LoopClosed && Last is not { LoopClosed: false } ? 1 : 0;
        Last = interlock;
    }

    /// <returns>False: the loop is open, or was since the openings were counted.</returns>
    public bool Confirm(int openings) => IsConfirmed = Openings == openings && Last is { LoopClosed: true };

    public void End() => IsConfirmed = false;
}
