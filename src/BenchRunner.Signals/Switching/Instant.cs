namespace BenchRunner.Signals.Switching;

/// <summary>When something happens in a record, or the reason why that cannot be said.</summary>
/// <param name="At">Position, in samples; meaningless where <see cref="Reason"/> is not null.</param>
/// <param name="Reason">Why there is no instant; null where there is one.</param>
public readonly record struct Instant(double At, string? Reason)
{
    /// <summary>An instant.</summary>
    public static Instant Of(double at) => new(at, null);

    /// <summary>No instant, and why.</summary>
    public static Instant None(string reason) => new(0, reason);
}
