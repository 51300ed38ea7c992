namespace BenchRunner.Instruments.Roles;

/// <summary>What the interlock controller says.</summary>
/// <param name="LoopClosed">Whether the enclosure's loop is closed.</param>
/// <param name="EmergencyStop">Whether the emergency stop is pressed.</param>
/// <param name="BleederEngaged">Whether the bleeder is across the bank.</param>
/// <param name="WatchdogTripped">Whether the controller's own watchdog has acted.</param>
public sealed record InterlockState(bool LoopClosed, bool EmergencyStop, bool BleederEngaged, bool WatchdogTripped);
