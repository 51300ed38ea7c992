namespace FakeBench.Fixtures;

/// <summary>The hardware that protects people: loop, emergency stop, watchdog; when it opens, the bank is
/// bled.</summary>
public sealed class SafetyChain
{
    private double? _watchdog;
    private double _fedAt;

    /// <summary>Whether the enclosure is open.</summary>
    public bool EnclosureOpen { get; set; }

    /// <summary>Whether a fault holds the loop open although the enclosure is closed.</summary>
    public bool LoopBroken { get; set; }

    /// <summary>Whether the enclosure's loop is closed.</summary>
    public bool LoopClosed => !EnclosureOpen && !LoopBroken;

    /// <summary>Whether the emergency stop is pressed.</summary>
    public bool EmergencyStop { get; set; }

    /// <summary>Whether the watchdog has acted; setting its time anew takes that back.</summary>
    public bool WatchdogTripped { get; private set; }

    /// <summary>Whether the bleeder relay is engaged. At power-on it is, and whenever the chain is open.</summary>
    public bool Bleeder { get; set; } = true;

    /// <summary>Whether the chain lets the supply and the pulser work.</summary>
    public bool Closed => LoopClosed && !EmergencyStop && !WatchdogTripped;

    /// <summary>Seconds without a poll after which the watchdog acts; 0: off.</summary>
    public double WatchdogTime => _watchdog ?? 0;

    /// <summary>When the watchdog acts unless it is fed, s; infinite: never.</summary>
    public double WatchdogDue => _watchdog is { } time && !WatchdogTripped ? _fedAt + time : double.PositiveInfinity;

    /// <summary>Sets the watchdog's time; 0 switches it off.</summary>
    public void SetWatchdog(double time, double now)
    {
        _watchdog = time > 0 ? time : null;
        _fedAt = now;
        WatchdogTripped = false;
    }

    /// <summary>A poll came.</summary>
    public void Feed(double now) => _fedAt = now;

    /// <summary>Lets the watchdog act if it is due.</summary>
    public void Watch(double now) => WatchdogTripped |= now >= WatchdogDue;
}
