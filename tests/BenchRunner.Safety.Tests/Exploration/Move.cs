namespace BenchRunner.Safety.Tests.Exploration;

/// <summary>One thing that happens.</summary>
/// <param name="What">In words.</param>
/// <param name="From">Before it.</param>
/// <param name="To">After it.</param>
internal sealed record Move(string What, World From, World To)
{
    /// <summary>Whether the supply was written to, to switch it on.</summary>
    public bool Energises { get; init; }

    /// <summary>Whether its reply was lost.</summary>
    public bool ReplyLost { get; init; }

    /// <summary>Whether the watch sent its heartbeat.</summary>
    public bool Beats { get; init; }

    public override string ToString() => $"{What}: {From} -> {To}";
}
