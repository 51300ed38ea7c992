namespace BenchRunner.Instruments.Permits;

/// <summary>Leave to energise the bench at one operating point; no energising operation compiles without it.</summary>
/// <remarks>
/// Granted by Safety alone, after interlock, envelope and bus were measured; a sealed class, since <c>default</c>
/// forges a struct and <c>with</c> edits a record. It dies at its deadline unless Safety renews it, and revoking is for
/// good. Thread-safe. Hardware stays the safety function. Not a plan: a plan says what is wanted, a permit what is
/// allowed.
/// </remarks>
public sealed class Permit
{
    private readonly Lock _gate = new();
    private readonly TimeProvider _time;
    private readonly TimeSpan _life;
    private long _renewedAt;
    private string? _revokedBecause;

    internal Permit(PermitBounds bounds, TimeProvider time, TimeSpan life)
    {
        ArgumentNullException.ThrowIfNull(bounds);
        ArgumentNullException.ThrowIfNull(time);
        ArgumentOutOfRangeException.ThrowIfLessThanOrEqual(life, TimeSpan.Zero);
        Bounds = bounds;
        _time = time;
        _life = life;
        _renewedAt = time.GetTimestamp();
    }

    /// <summary>How far the permit goes.</summary>
    public PermitBounds Bounds { get; }

    /// <summary>Why the permit is not live at this moment; null while it is.</summary>
    public string? WhyNot
    {
        get
        {
            lock (_gate)
            {
                return Doubt();
            }
        }
    }

    /// <summary>Puts the deadline off by one life; a permit once revoked or overdue stays dead.</summary>
    internal void Renew()
    {
        lock (_gate)
        {
            if (Doubt() is null)
            {
                _renewedAt = _time.GetTimestamp();
            }
        }
    }

    /// <summary>Ends the permit for good. When this returns, no write guarded by it is under way.</summary>
    internal void Revoke(string because)
    {
        lock (_gate)
        {
            _revokedBecause ??= because;
        }
    }

    /// <summary>Does a write that energises or fires, under the lock that revoking takes.</summary>
    /// <exception cref="PermitException">The permit is not live: nothing was written.</exception>
    internal void Guard(Action write)
    {
        lock (_gate)
        {
            if (Doubt() is { } reason)
            {
                throw new PermitException($"permit for {Bounds.OperatingPoint}: {reason}");
            }

            write();
        }
    }

    private string? Doubt()
    {
        if (_revokedBecause is null && _time.GetElapsedTime(_renewedAt) > _life)
        {
            _revokedBecause = $"not renewed within {_life.TotalSeconds:0.#} s";
        }

        return _revokedBecause;
    }
}
