using BenchRunner.Runner.Devices;

namespace BenchRunner.Runner.Sessions;

/// <summary>How a session ended.</summary>
/// <param name="Devices">A report a device that was run, in order.</param>
/// <param name="NotRun">Serials that got no run after a trip or failure.</param>
/// <param name="Simulated">Whether the bench was simulated.</param>
/// <param name="BrokenOff">What ended the session after its last report (an exchange that failed, a confirmation that
/// was declined, an interrupt); null: it came to its end, or the last report says why not.</param>
public sealed record RunSummary(
    IReadOnlyList<DeviceReport> Devices, IReadOnlyList<string> NotRun, bool Simulated, Exception? BrokenOff = null);
