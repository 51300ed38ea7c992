namespace FakeBench.Faults;

/// <summary>Which faults were asked for, and which of them have begun.</summary>
/// <remarks>Under the bench's lock. A fault that lasts is asked by <see cref="Has"/>; one that happens once by
/// <see cref="Take"/>.</remarks>
public sealed class FaultPlan(IEnumerable<Fault> faults)
{
    private readonly List<Fault> _waiting = [.. faults];
    private readonly List<string> _begun = [];
    private readonly List<string> _pending = [];

    /// <summary>Next time at which a fault begins, s; infinite: none.</summary>
    public double NextSeconds => Next(MomentKind.Seconds);

    /// <summary>Next bank voltage at which a fault begins, V; infinite: none.</summary>
    public double NextVolts => Next(MomentKind.Volts);

    /// <summary>Whether a fault has begun; it lasts.</summary>
    public bool Has(string name) => _begun.Contains(name);

    /// <summary>Whether a fault has begun and has not yet been taken; it happens once.</summary>
    public bool Take(string name) => _pending.Remove(name);

    /// <summary>Whether a fault that acts once has acted.</summary>
    public bool HasActed(string name) => _begun.Contains(name) && !_pending.Contains(name);

    /// <summary>Something has come to a value: faults of that moment begin.</summary>
    /// <returns>The names of those that began now.</returns>
    public IReadOnlyList<string> Reach(MomentKind kind, double value)
    {
        List<Fault> now = _waiting.FindAll(f => f.Begins.Kind == kind && f.Begins.Value <= value);
        foreach (Fault fault in now)
        {
            _waiting.Remove(fault);
            _begun.Add(fault.Name);
            _pending.Add(fault.Name);
        }

        return [.. now.Select(f => f.Name)];
    }

    private double Next(MomentKind kind)
    {
        double next = double.PositiveInfinity;
        foreach (Fault fault in _waiting)
        {
            next = fault.Begins.Kind == kind ? Math.Min(next, fault.Begins.Value) : next;
        }

        return next;
    }
}
